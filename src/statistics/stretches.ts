/**
 * Points ascending in x, and the overall line that is taken off y while it is read: what is fitted is the
 * height above that line, against the distance from the first x. Both keep the digits that a large offset
 * of x or y would cost.
 */
export interface LevelledPoints {
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly meanX: number;
  readonly meanY: number;
  readonly slope: number;
}

/**
 * How some points lie: means of the distance d and of the height h, and the sums of (d − d̄)²,
 * (d − d̄)(h − h̄) and (h − h̄)². So many numbers are kept for each border.
 */
export const momentsKept = 5;

/** The data cut in stretches, and how all points left and all points right of each border lie. */
export interface Stretches {
  /** Index of the first point of each stretch but the first, which begins at 0. */
  readonly borders: Int32Array;
  readonly left: Float64Array;
  readonly right: Float64Array;
  /** Sum of (h − h̄)² over all points: what the overall line leaves. */
  readonly sumOfSquares: number;
  /** Sum of h² over all points. */
  readonly sumAboutLevel: number;
}

/**
 * Moments on both sides of each border, in one pass over the points. Those of each stretch are taken
 * about its own means and put together from both ends by the formulas of T. F. Chan, G. H. Golub and
 * R. J. LeVeque (The American Statistician 37 (1983); from memory), so that no digits are lost.
 * Memory grows with the number of borders only. Every stretch must hold a point.
 */
export function cutInStretches(points: LevelledPoints, borders: Int32Array): Stretches {
  const count = points.x.length;
  const stretches = new Float64Array(momentsKept * (borders.length + 1));
  for (let stretch = 0; stretch <= borders.length; stretch += 1) {
    const from = stretch === 0 ? 0 : (borders[stretch - 1] as number);
    const to = stretch === borders.length ? count : (borders[stretch] as number);
    takeMoments(points, from, to, stretches, momentsKept * stretch);
  }
  const left = stretches.slice(0, -momentsKept);
  for (let border = 1; border < borders.length; border += 1) {
    const before = borders[border - 1] as number;
    putTogether(
      left,
      momentsKept * border,
      (borders[border] as number) - before,
      left,
      momentsKept * (border - 1),
      before,
    );
  }
  const right = stretches.slice(momentsKept);
  for (let border = borders.length - 2; border >= 0; border -= 1) {
    const after = borders[border + 1] as number;
    putTogether(
      right,
      momentsKept * border,
      after - (borders[border] as number),
      right,
      momentsKept * (border + 1),
      count - after,
    );
  }
  const first = borders[0] as number;
  const all = stretches.slice(0, momentsKept);
  putTogether(all, 0, first, right, 0, count - first);
  const sumOfSquares = all[4] as number;
  return {
    borders,
    left,
    right,
    sumOfSquares,
    sumAboutLevel: sumOfSquares + count * (all[1] as number) ** 2,
  };
}

/** What the residuals from a line through these points add up to, at the least. */
export function leastSquares(moments: Float64Array, at: number): number {
  return (moments[at + 4] as number) - (moments[at + 3] as number) ** 2 / (moments[at + 2] as number);
}

function takeMoments(points: LevelledPoints, from: number, to: number, into: Float64Array, at: number): void {
  const { x, y, meanX, meanY, slope } = points;
  const origin = x[from] as number;
  const originHeight = (y[from] as number) - meanY - slope * (origin - meanX);
  let sumD = 0;
  let sumH = 0;
  let sumDD = 0;
  let sumDH = 0;
  let sumHH = 0;
  for (let index = from + 1; index < to; index += 1) {
    const place = x[index] as number;
    const distance = place - origin;
    const height = (y[index] as number) - meanY - slope * (place - meanX) - originHeight;
    sumD += distance;
    sumH += height;
    sumDD += distance * distance;
    sumDH += distance * height;
    sumHH += height * height;
  }
  const count = to - from;
  into[at] = origin - (x[0] as number) + sumD / count;
  into[at + 1] = originHeight + sumH / count;
  into[at + 2] = sumDD - (sumD * sumD) / count;
  into[at + 3] = sumDH - (sumD * sumH) / count;
  into[at + 4] = sumHH - (sumH * sumH) / count;
}

/** Adds the moments of `otherCount` further points to those of `count` points, in place. */
function putTogether(
  moments: Float64Array,
  at: number,
  count: number,
  others: Float64Array,
  otherAt: number,
  otherCount: number,
): void {
  const stepX = (others[otherAt] as number) - (moments[at] as number);
  const stepH = (others[otherAt + 1] as number) - (moments[at + 1] as number);
  const share = otherCount / (count + otherCount);
  const weight = count * share;
  moments[at] = (moments[at] as number) + stepX * share;
  moments[at + 1] = (moments[at + 1] as number) + stepH * share;
  moments[at + 2] = (moments[at + 2] as number) + (others[otherAt + 2] as number) + stepX * stepX * weight;
  moments[at + 3] = (moments[at + 3] as number) + (others[otherAt + 3] as number) + stepX * stepH * weight;
  moments[at + 4] = (moments[at + 4] as number) + (others[otherAt + 4] as number) + stepH * stepH * weight;
}
