import type { LevelledPoints } from './stretches.js';

/** One piece of a broken line: the line itself, and how its points lie. */
export interface Piece {
  readonly points: number;
  /** Mean of the distances d from the first x. */
  readonly meanD: number;
  /** Height of the line at meanD. */
  readonly heightAtMean: number;
  readonly slope: number;
  /** Sum of the squares of d − meanD. */
  readonly spreadD: number;
}

/** The best broken line whose break lies in one given gap between neighbouring points. */
export interface SplitFit {
  /** How many points lie left of the gap. */
  readonly split: number;
  /** Distance of the break from the first x. */
  readonly breakD: number;
  /** Whether the pieces fitted apart cross in the gap, or the break had to be put at a point beside it. */
  readonly placedBy: 'crossing' | 'point';
  /** Where the pieces fitted apart cross, in the gap or not; not finite when they are parallel. */
  readonly crossingD: number;
  readonly left: Piece;
  readonly right: Piece;
  readonly sumOfSquares: number;
}

/**
 * Fits a broken line with its break from x[split − 1] to x[split], to the heights above the overall line.
 * Sums are taken about the means and residuals summed one by one: what the search found in running sums
 * is worked out here to the last digits. x ascends; both parts hold two different x.
 */
export function fitAtSplit(points: LevelledPoints, split: number): SplitFit {
  const { x } = points;
  const left = lineThrough(points, 0, split);
  const right = lineThrough(points, split, x.length);
  const before = (x[split - 1] as number) - (x[0] as number);
  const after = (x[split] as number) - (x[0] as number);
  const stepBefore = heightOf(left, before) - heightOf(right, before);
  const stepAfter = heightOf(left, after) - heightOf(right, after);
  const crossingD = before + (after - before) * (stepBefore / (stepBefore - stepAfter));
  if (stepBefore * stepAfter <= 0 && stepBefore !== stepAfter) {
    const sumOfSquares = residuals(points, 0, split, left) + residuals(points, split, x.length, right);
    return { split, breakD: crossingD, placedBy: 'crossing', crossingD, left, right, sumOfSquares };
  }
  const lossBefore = stepBefore ** 2 / (heightVariance(left, before) + heightVariance(right, before));
  const lossAfter = stepAfter ** 2 / (heightVariance(left, after) + heightVariance(right, after));
  const breakD = lossBefore <= lossAfter ? before : after;
  const [bentLeft, bentRight] = joinedAt(left, right, breakD);
  return {
    split,
    breakD,
    placedBy: 'point',
    crossingD,
    left: bentLeft,
    right: bentRight,
    sumOfSquares: residuals(points, 0, split, bentLeft) + residuals(points, split, x.length, bentRight),
  };
}

/** Height of a piece, or of its prolongation, at the distance `d` from the first x. */
export function heightOf(piece: Piece, d: number): number {
  return piece.heightAtMean + piece.slope * (d - piece.meanD);
}

/** Variance of the height of a piece fitted freely, at one place, for unit scatter of the points. */
export function heightVariance(piece: Piece, d: number): number {
  return 1 / piece.points + (d - piece.meanD) ** 2 / piece.spreadD;
}

/** Least squares with the two pieces made to meet at `d`: a linear constraint, by Lagrange's multiplier. */
function joinedAt(left: Piece, right: Piece, d: number): readonly [Piece, Piece] {
  const step = heightOf(left, d) - heightOf(right, d);
  const pull = step / (heightVariance(left, d) + heightVariance(right, d));
  return [pulled(left, d, -pull), pulled(right, d, pull)];
}

function pulled(piece: Piece, d: number, pull: number): Piece {
  return {
    ...piece,
    heightAtMean: piece.heightAtMean + pull / piece.points,
    slope: piece.slope + (pull * (d - piece.meanD)) / piece.spreadD,
  };
}

function lineThrough({ x, y, meanX, meanY, slope }: LevelledPoints, from: number, to: number): Piece {
  const points = to - from;
  const origin = x[from] as number;
  let sumD = 0;
  let sumH = 0;
  for (let index = from; index < to; index += 1) {
    const place = x[index] as number;
    sumD += place - origin;
    sumH += (y[index] as number) - meanY - slope * (place - meanX);
  }
  const middle = sumD / points;
  const heightAtMean = sumH / points;
  let spreadD = 0;
  let spreadDH = 0;
  for (let index = from; index < to; index += 1) {
    const place = x[index] as number;
    const fromMiddle = place - origin - middle;
    spreadD += fromMiddle * fromMiddle;
    spreadDH += fromMiddle * ((y[index] as number) - meanY - slope * (place - meanX) - heightAtMean);
  }
  const meanD = origin - (x[0] as number) + middle;
  return { points, meanD, heightAtMean, slope: spreadDH / spreadD, spreadD };
}

function residuals(points: LevelledPoints, from: number, to: number, piece: Piece): number {
  const { x, y, meanX, meanY, slope } = points;
  const { meanD, heightAtMean, slope: ownSlope } = piece;
  const first = x[0] as number;
  let sum = 0;
  for (let index = from; index < to; index += 1) {
    const place = x[index] as number;
    const height = (y[index] as number) - meanY - slope * (place - meanX);
    const residual = height - heightAtMean - ownSlope * (place - first - meanD);
    sum += residual * residual;
  }
  return sum;
}
