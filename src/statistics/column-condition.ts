/** How well columns are told apart. */
export interface ColumnCondition {
  /** Largest over smallest singular value of the columns scaled to length 1: from 1, at right angles, to Infinity. */
  readonly condition: number;
  /** The columns, counted from 0, that make up the combination that comes closest to nothing. */
  readonly weakest: readonly number[];
}

/** A column belongs to the weakest combination if it has at least this share of its largest. */
const takesPart = 0.1;
const mostSweeps = 60;

/**
 * Condition of columns whose own size does not matter: that one is in volts and another in millivolts
 * makes no unknown harder to tell. The scaling comes within √k of the best there is (A. van der Sluis,
 * Numer. Math. 14 (1969); from memory). Singular values by one-sided Jacobi rotations, which turn pairs of
 * columns until all are at right angles (M. R. Hestenes, J. SIAM 6 (1958); from memory): accurate for
 * small values too. For a few columns.
 */
export function columnCondition(columns: readonly Float64Array[]): ColumnCondition {
  const lengths = columns.map((column) => Math.hypot(...column));
  const empty = [...lengths.keys()].filter((index) => !((lengths[index] as number) > 0));
  if (empty.length > 0) return { condition: Infinity, weakest: empty };
  const turned = columns.map((column, index) => column.map((of) => of / (lengths[index] as number)));
  const shares = columns.map((_, index) => Float64Array.from(columns, (__, row) => (row === index ? 1 : 0)));
  for (let sweep = 0; sweep < mostSweeps && turnPairs(turned, shares); sweep += 1);
  const values = turned.map((column) => Math.hypot(...column));
  const smallest = Math.min(...values);
  const share = shares[values.indexOf(smallest)] as Float64Array;
  const most = Math.max(...share.map(Math.abs));
  return {
    condition: Math.max(...values) / smallest,
    weakest: [...share.keys()].filter((index) => Math.abs(share[index] as number) >= takesPart * most),
  };
}

/** Turns each pair of columns to right angles, once; false when all were already. */
function turnPairs(columns: readonly Float64Array[], shares: readonly Float64Array[]): boolean {
  let turned = false;
  for (let one = 0; one < columns.length; one += 1) {
    for (let other = one + 1; other < columns.length; other += 1) {
      const left = columns[one] as Float64Array;
      const right = columns[other] as Float64Array;
      const across = product(left, right);
      const [leftSquare, rightSquare] = [product(left, left), product(right, right)];
      if (Math.abs(across) <= Number.EPSILON * Math.sqrt(leftSquare * rightSquare)) continue;
      turned = true;
      const difference = (rightSquare - leftSquare) / (2 * across);
      const tangent = (difference < 0 ? -1 : 1) / (Math.abs(difference) + Math.hypot(1, difference));
      const cosine = 1 / Math.hypot(1, tangent);
      turnBy(left, right, cosine, cosine * tangent);
      turnBy(shares[one] as Float64Array, shares[other] as Float64Array, cosine, cosine * tangent);
    }
  }
  return turned;
}

function turnBy(left: Float64Array, right: Float64Array, cosine: number, sine: number): void {
  for (let row = 0; row < left.length; row += 1) {
    const [a, b] = [left[row] as number, right[row] as number];
    left[row] = cosine * a - sine * b;
    right[row] = sine * a + cosine * b;
  }
}

function product(one: Float64Array, other: Float64Array): number {
  return one.reduce((sum, of, row) => sum + of * (other[row] as number), 0);
}
