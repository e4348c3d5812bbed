/** Points in ascending order of x, in memory that a fit may read fast. */
export interface SortedPoints {
  readonly x: Float64Array;
  readonly y: Float64Array;
}

/**
 * Points in ascending order of x. Data that ascend already are taken as they are (typed arrays are not
 * even copied), data that descend are turned round; only the rest is sorted. x and y of the same length.
 */
export function sortedPoints(x: ArrayLike<number>, y: ArrayLike<number>): SortedPoints {
  const plainX = x instanceof Float64Array ? x : Float64Array.from(x);
  const plainY = y instanceof Float64Array ? y : Float64Array.from(y);
  if (ascends(plainX)) return { x: plainX, y: plainY };
  const turnedX = plainX.toReversed();
  if (ascends(turnedX)) return { x: turnedX, y: plainY.toReversed() };
  const order = Uint32Array.from(plainX.keys());
  order.sort((one, other) => (plainX[one] as number) - (plainX[other] as number));
  return {
    x: Float64Array.from(order, (index) => plainX[index] as number),
    y: Float64Array.from(order, (index) => plainY[index] as number),
  };
}

function ascends(values: Float64Array): boolean {
  for (let index = 1; index < values.length; index += 1) {
    if ((values[index] as number) < (values[index - 1] as number)) return false;
  }
  return true;
}
