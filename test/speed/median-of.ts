/** The middle one, or the mean of the two in the middle. */
export function medianOf(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length / 2;
  const above = sorted[Math.floor(middle)] ?? Number.NaN;
  return Number.isInteger(middle) ? ((sorted[middle - 1] ?? Number.NaN) + above) / 2 : above;
}
