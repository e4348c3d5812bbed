/**
 * A field of a terminal, so many signs wide and high, on which points are set: two by four of them in each sign, in
 * Unicode's braille patterns (U+2800 to U+28FF), or one in each where only ASCII can be trusted.
 */
export class DotGrid {
  readonly #width: number;
  readonly #height: number;
  readonly #unicode: boolean;
  readonly #dots: number[][];
  readonly #signs: (string | undefined)[][];

  constructor(width: number, height: number, unicode: boolean) {
    this.#width = width;
    this.#height = height;
    this.#unicode = unicode;
    this.#dots = Array.from({ length: height }, () => Array.from({ length: width }, () => 0));
    this.#signs = Array.from({ length: height }, () => Array.from({ length: width }, () => undefined));
  }

  /** @param x from the left edge, 0, to the right, 1. @param y from the lower edge, 0, to the upper, 1. */
  dot(x: number, y: number): void {
    const column = placed(x, this.#width * 2);
    const row = placed(1 - y, this.#height * 4);
    const bits = this.#dots[Math.floor(row / 4)];
    const at = Math.floor(column / 2);
    if (bits !== undefined) bits[at] = (bits[at] ?? 0) | (dotBits[row % 4]?.[column % 2] ?? 0);
  }

  /** A sign of its own in place of points. */
  sign(x: number, y: number, sign: string): void {
    const row = this.#signs[placed(1 - y, this.#height)];
    if (row !== undefined) row[placed(x, this.#width)] = sign;
  }

  /** From top to bottom where nothing else stands. */
  upright(column: number): void {
    this.#dots.forEach((bits, row) => {
      const signs = this.#signs[row];
      if (signs !== undefined && (bits[column] ?? 0) === 0) signs[column] ??= this.#unicode ? '┊' : ':';
    });
  }

  rows(): readonly string[] {
    return this.#dots.map((bits, row) =>
      bits.map((each, column) => this.#signs[row]?.[column] ?? this.#dotSign(each)).join(''),
    );
  }

  #dotSign(bits: number): string {
    if (bits === 0) return ' ';
    return this.#unicode ? String.fromCodePoint(0x2800 + bits) : '*';
  }
}

/** By row and column of a braille sign. */
const dotBits = [
  [0x01, 0x08],
  [0x02, 0x10],
  [0x04, 0x20],
  [0x40, 0x80],
] as const;

/** The place of a share of the way among so many. */
export function placed(share: number, count: number): number {
  return Math.min(count - 1, Math.max(0, Math.floor(share * count)));
}
