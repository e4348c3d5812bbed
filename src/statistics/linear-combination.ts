import { columnCondition } from './column-condition.js';
import { UnfitDataError } from './unfit-data-error.js';

/** Coefficients of y = Σ coefficient·x, or why the rows do not determine them. */
export type LinearCombinationOutcome = LinearCombinationFit | UndeterminedCombination;

/** Everything here is in the order of the unknowns. */
export interface LinearCombinationFit {
  readonly kind: 'determined';
  /** In the unit of y per unit of its x. */
  readonly coefficients: readonly number[];
  readonly uncertainties: readonly number[];
  readonly covariance: readonly (readonly number[])[];
  /** Standard deviation of the residuals, rows − unknowns in the denominator. */
  readonly residualDeviation: number;
  /** Of the residuals. */
  readonly sumOfSquares: number;
  readonly degreesOfFreedom: number;
  readonly rows: number;
  /** 1 when the unknowns are told apart perfectly; scatter is magnified by up to this. */
  readonly condition: number;
}

/**
 * `too-few-rows`: at least one more row than unknowns is needed for an uncertainty.
 * `not-told-apart`: the rows change those unknowns (counted from 0) only together, or not at all.
 */
export type UndeterminedCombination =
  | {
      readonly kind: 'undetermined';
      readonly why: 'too-few-rows';
      readonly rows: number;
      readonly needed: number;
    }
  | {
      readonly kind: 'undetermined';
      readonly why: 'not-told-apart';
      readonly rows: number;
      readonly unknowns: readonly number[];
      readonly condition: number;
    };

const mostUnknowns = 16;
/** Beyond this, rounding of the rows alone would decide the coefficients. */
const largestCondition = 1e10;

/**
 * Ordinary least squares without an intercept, y = Σ a_k·x_k, for rows that come one at a time and are not
 * kept: memory does not grow with their number, and a row costs the square of the number of unknowns.
 *
 * Each row is turned into a triangle by Givens rotations (G. H. Golub & C. F. Van Loan, Matrix
 * Computations; from memory), that is a QR decomposition: the squares of the normal equations, which lose
 * half the digits, are never formed.
 * @example
 * const combination = new LinearCombination(1);
 * for (const [volts, amps] of [[0.1, 2], [0.2, 4], [0.3, 6]] as const) combination.add([volts], amps);
 * combination.solve(); // => { kind: 'determined', coefficients: [20], … }
 */
export class LinearCombination {
  readonly unknowns: number;
  #rows = 0;
  #sumOfSquares = 0;
  /** Upper triangle, row by row in a square, with what y is turned into as the last column. */
  readonly #triangle: Float64Array;
  readonly #incoming: Float64Array;

  /** @throws UnfitDataError unless there are 1 to 16 unknowns. */
  constructor(unknowns: number) {
    if (!(Number.isInteger(unknowns) && unknowns >= 1 && unknowns <= mostUnknowns)) {
      throw new UnfitDataError(
        'LinearCombination',
        `there are ${unknowns} unknowns, not 1 to ${mostUnknowns}`,
      );
    }
    this.unknowns = unknowns;
    this.#triangle = new Float64Array(unknowns * (unknowns + 1));
    this.#incoming = new Float64Array(unknowns + 1);
  }

  get rows(): number {
    return this.#rows;
  }

  /**
   * Takes one more row in: an x for each unknown, and y.
   * @throws UnfitDataError for the wrong number of x, or values that are not finite; nothing is changed then.
   */
  add(row: ArrayLike<number>, y: number): void {
    this.#requireFit(row, y);
    const { unknowns } = this;
    const triangle = this.#triangle;
    const incoming = this.#incoming;
    for (let column = 0; column < unknowns; column += 1) incoming[column] = row[column] as number;
    incoming[unknowns] = y;
    const width = unknowns + 1;
    for (let pivot = 0; pivot < unknowns; pivot += 1) {
      const below = incoming[pivot] as number;
      if (below === 0) continue;
      const above = triangle[pivot * width + pivot] as number;
      const length = Math.hypot(above, below);
      const cosine = above / length;
      const sine = below / length;
      for (let column = pivot; column < width; column += 1) {
        const upper = triangle[pivot * width + column] as number;
        const lower = incoming[column] as number;
        triangle[pivot * width + column] = cosine * upper + sine * lower;
        incoming[column] = cosine * lower - sine * upper;
      }
    }
    // What no unknown can explain of this row, given those before it.
    this.#sumOfSquares += incoming[unknowns] ** 2;
    this.#rows += 1;
  }

  /** The coefficients that the rows so far give; more rows may follow. */
  solve(): LinearCombinationOutcome {
    const { unknowns } = this;
    const rows = this.#rows;
    if (rows <= unknowns) return { kind: 'undetermined', why: 'too-few-rows', rows, needed: unknowns + 1 };
    const all = Array.from({ length: unknowns }, (_, index) => index);
    const { condition, weakest } = columnCondition(
      all.map((column) => Float64Array.from(all, (row) => this.#at(row, column))),
    );
    if (!(condition <= largestCondition)) {
      return { kind: 'undetermined', why: 'not-told-apart', rows, unknowns: weakest, condition };
    }
    const inverse = this.#inverseOfTriangle();
    const degreesOfFreedom = rows - unknowns;
    const variance = this.#sumOfSquares / degreesOfFreedom;
    const coefficients = inverse.map((of) =>
      of.reduce((sum, factor, row) => sum + factor * this.#at(row, unknowns), 0),
    );
    const covariance = inverse.map((one) =>
      inverse.map(
        (other) => variance * one.reduce((sum, of, index) => sum + of * (other[index] as number), 0),
      ),
    );
    return {
      kind: 'determined',
      coefficients,
      uncertainties: inverse.map((of) => Math.sqrt(variance) * Math.hypot(...of)),
      covariance,
      residualDeviation: Math.sqrt(variance),
      sumOfSquares: this.#sumOfSquares,
      degreesOfFreedom,
      rows,
      condition,
    };
  }

  #at(row: number, column: number): number {
    return this.#triangle[row * (this.unknowns + 1) + column] as number;
  }

  /** Row by row. */
  #inverseOfTriangle(): number[][] {
    const { unknowns } = this;
    const inverse = Array.from({ length: unknowns }, () => new Array<number>(unknowns).fill(0));
    for (let column = 0; column < unknowns; column += 1) {
      for (let row = column; row >= 0; row -= 1) {
        let sum = row === column ? 1 : 0;
        for (let middle = row + 1; middle <= column; middle += 1) {
          sum -= this.#at(row, middle) * (inverse[middle]?.[column] ?? 0);
        }
        (inverse[row] as number[])[column] = sum / this.#at(row, row);
      }
    }
    return inverse;
  }

  #requireFit(row: ArrayLike<number>, y: number): void {
    const place = `row ${this.#rows + 1}`;
    if (row.length !== this.unknowns) {
      const found = `has ${row.length} values for ${this.unknowns} unknowns`;
      throw new UnfitDataError('LinearCombination', `${place} ${found}`);
    }
    for (let column = 0; column < row.length; column += 1) {
      if (Number.isFinite(row[column])) continue;
      const found = `value ${column + 1} of ${place} is ${String(row[column])}`;
      throw new UnfitDataError('LinearCombination', found);
    }
    if (!Number.isFinite(y)) throw new UnfitDataError('LinearCombination', `y of ${place} is ${y}`);
  }
}
