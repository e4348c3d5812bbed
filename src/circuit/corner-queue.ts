export const begins = 0;
export const atCeiling = 1;
export const atLimit = 2;
export const kinds = ['begins', 'at-ceiling', 'at-limit'] as const;

/** Which of `kinds`. */
export type CornerKind = typeof begins | typeof atCeiling | typeof atLimit;

/**
 * The corners of a group's line in the order in which a falling bus meets them. It is filled ten thousand times
 * over and must leave nothing to be collected, so it lives in typed arrays.
 */
export class CornerQueue {
  readonly #bus: Float64Array;
  /** Which of a branch's corners: the branch, and in the lowest two bits the kind. */
  readonly #corner: Int32Array;
  #length = 0;

  constructor(most: number) {
    this.#bus = new Float64Array(most);
    this.#corner = new Int32Array(most);
  }

  get length(): number {
    return this.#length;
  }

  clear(): void {
    this.#length = 0;
  }

  /** Behind those at the same bus. Cost: the corners that lie lower; they are few. */
  insert(bus: number, branch: number, kind: CornerKind): void {
    const buses = this.#bus;
    const corners = this.#corner;
    let place = this.#length;
    for (; place > 0 && (buses[place - 1] as number) < bus; place -= 1) {
      buses[place] = buses[place - 1] as number;
      corners[place] = corners[place - 1] as number;
    }
    buses[place] = bus;
    corners[place] = (branch << 2) | kind;
    this.#length += 1;
  }

  busOf(place: number): number {
    return this.#bus[place] as number;
  }

  branchOf(place: number): number {
    return (this.#corner[place] as number) >> 2;
  }

  kindOf(place: number): CornerKind {
    return ((this.#corner[place] as number) & 3) as CornerKind;
  }
}
