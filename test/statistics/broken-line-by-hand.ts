type Point = readonly [x: number, y: number];

/** The least sum of squares over many breaks, each solved by its normal equations. */
export function leastByGrid(points: readonly Point[]): number {
  const places = different(points);
  const from = places[1] ?? NaN;
  const to = places[places.length - 2] ?? NaN;
  let least = Infinity;
  for (let step = 0; step <= 400; step += 1)
    least = Math.min(least, withBreakAt(points, from + ((to - from) * step) / 400));
  return least;
}

/**
 * The least sum of squares over the allowed breaks, gap by gap and point by point, with every sum taken
 * afresh: slow, and with nothing in common with the search but the model.
 */
export function leastByGaps(
  points: readonly Point[],
): { sumOfSquares: number; sumOfSquaresOfLine: number } | undefined {
  const places = different(points);
  if (points.length < 5 || places.length < 4) return undefined;
  let least = Infinity;
  for (let gap = 1; gap < places.length - 2; gap += 1) {
    const [before, after] = [places[gap] ?? NaN, places[gap + 1] ?? NaN];
    least = Math.min(least, withBreakAt(points, before), withBreakAt(points, after));
    const left = line(points.filter(([x]) => x <= before));
    const right = line(points.filter(([x]) => x >= after));
    const crossing = (left.intercept - right.intercept) / (right.slope - left.slope);
    if (crossing > before && crossing < after)
      least = Math.min(least, left.sumOfSquares + right.sumOfSquares);
  }
  return { sumOfSquares: least, sumOfSquaresOfLine: line(points).sumOfSquares };
}

function different(points: readonly Point[]): number[] {
  return [...new Set(points.map(([x]) => x))].sort((one, other) => one - other);
}

function withBreakAt(points: readonly Point[], psi: number): number {
  return residualsOf(points.map(([x, y]) => [[1, Math.min(x - psi, 0), Math.max(x - psi, 0)], y] as const))
    .sumOfSquares;
}

function line(points: readonly Point[]) {
  const { sumOfSquares, coefficients } = residualsOf(points.map(([x, y]) => [[1, x], y] as const));
  return { sumOfSquares, intercept: coefficients[0] ?? NaN, slope: coefficients[1] ?? NaN };
}

/** Least squares by the normal equations and Gauss–Jordan elimination with pivots. */
function residualsOf(rows: readonly (readonly [readonly number[], number])[]) {
  const size = rows[0]?.[0].length ?? 0;
  const matrix = Array.from({ length: size }, (_, i) => [
    ...Array.from({ length: size }, (__, j) =>
      rows.reduce((sum, [row]) => sum + (row[i] ?? NaN) * (row[j] ?? NaN), 0),
    ),
    rows.reduce((sum, [row, y]) => sum + (row[i] ?? NaN) * y, 0),
  ]);
  for (let column = 0; column < size; column += 1) {
    const rest = matrix.slice(column);
    const pivot = rest.reduce((best, row) =>
      Math.abs(row[column] ?? 0) > Math.abs(best[column] ?? 0) ? row : best,
    );
    const place = matrix.indexOf(pivot);
    [matrix[column], matrix[place]] = [pivot, matrix[column] ?? []];
    for (const row of matrix) {
      if (row === pivot) continue;
      const factor = (row[column] ?? NaN) / (pivot[column] ?? NaN);
      for (let j = column; j <= size; j += 1) row[j] = (row[j] ?? NaN) - factor * (pivot[j] ?? NaN);
    }
  }
  const coefficients = matrix.map((row, i) => (row[size] ?? NaN) / (row[i] ?? NaN));
  const sumOfSquares = rows.reduce(
    (sum, [row, y]) =>
      sum + (y - row.reduce((value, basis, i) => value + basis * (coefficients[i] ?? NaN), 0)) ** 2,
    0,
  );
  return { coefficients, sumOfSquares };
}
