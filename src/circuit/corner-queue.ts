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
  readonly #branch: Int32Array;
  readonly #kind: Uint8Array;
  #length = 0;

  constructor(most: number) {
    this.#bus = new Float64Array(most);
    this.#branch = new Int32Array(most);
    this.#kind = new Uint8Array(most);
  }

  get length(): number {
    return this.#length;
  }

  clear(): void {
    this.#length = 0;
  }

  /** Behind those at the same bus. Cost: the corners that lie lower; they are few. */
  insert(bus: number, branch: number, kind: CornerKind): void {
    let place = this.#length;
    for (; place > 0 && this.busOf(place - 1) < bus; place -= 1) {
      this.#bus[place] = this.busOf(place - 1);
      this.#branch[place] = this.branchOf(place - 1);
      this.#kind[place] = this.kindOf(place - 1);
    }
    this.#bus[place] = bus;
    this.#branch[place] = branch;
    this.#kind[place] = kind;
    this.#length += 1;
  }

  busOf(place: number): number {
    return this.#bus[place] as number;
  }

  branchOf(place: number): number {
    return this.#branch[place] as number;
  }

  kindOf(place: number): CornerKind {
    return this.#kind[place] as CornerKind;
  }
}
