/** How far `actual` is from `expected`, as a share of `expected`; the plain difference where that is 0. */
export function relativeError(actual: number, expected: number): number {
  return Math.abs(actual - expected) / (expected === 0 ? 1 : Math.abs(expected));
}
