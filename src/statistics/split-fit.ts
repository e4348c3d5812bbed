import type { LevelledPoints } from './end-sums.js';

/** One piece of a broken line: the line itself, and how its points lie. */
export interface Piece {
  readonly points: number;
  readonly meanX: number;
  /** Height of the line at meanX. */
  readonly heightAtMean: number;
  readonly slope: number;
  /** Sum of the squares of x − meanX. */
  readonly spreadX: number;
}

/** The best broken line whose break lies in one given gap between neighbouring points. */
export interface SplitFit {
  /** How many points lie left of the gap. */
  readonly split: number;
  readonly breakX: number;
  /** Whether the pieces fitted apart cross in the gap, or the break had to be put at a point beside it. */
  readonly placedBy: 'crossing' | 'point';
  /** Where the pieces fitted apart cross, in the gap or not; undefined when they are parallel. */
  readonly crossing: number | undefined;
  readonly left: Piece;
  readonly right: Piece;
  readonly sumOfSquares: number;
}

/**
 * Fits a broken line, to the heights above the overall line, with its break from x[split − 1] to x[split], with sums about the means and the
 * residuals summed one by one: what the search found in running sums is worked out here to the last digits.
 * x ascends; both parts hold two different x.
 */
export function fitAtSplit(points: LevelledPoints, split: number): SplitFit {
  const { x } = points;
  const apartLeft = lineThrough(points, 0, split);
  const apartRight = lineThrough(points, split, x.length);
  const before = x[split - 1] as number;
  const after = x[split] as number;
  const stepBefore = stepAt(apartLeft, apartRight, before);
  const stepAfter = stepAt(apartLeft, apartRight, after);
  const turn = apartRight.slope - apartLeft.slope;
  const crossing = turn === 0 ? undefined : before + stepBefore / turn;

  if (stepBefore * stepAfter <= 0 && stepBefore !== stepAfter) {
    const within = before + (after - before) * (stepBefore / (stepBefore - stepAfter));
    const sumOfSquares =
      residuals(points, 0, split, apartLeft) + residuals(points, split, x.length, apartRight);
    return {
      split,
      breakX: within,
      placedBy: 'crossing',
      crossing,
      left: apartLeft,
      right: apartRight,
      sumOfSquares,
    };
  }
  const lossBefore = stepBefore ** 2 / stepVariance(apartLeft, apartRight, before);
  const lossAfter = stepAfter ** 2 / stepVariance(apartLeft, apartRight, after);
  const breakX = lossBefore <= lossAfter ? before : after;
  const [left, right] = joinedAt(apartLeft, apartRight, breakX);
  const sumOfSquares = residuals(points, 0, split, left) + residuals(points, split, x.length, right);
  return { split, breakX, placedBy: 'point', crossing, left, right, sumOfSquares };
}

/** Height of a piece, or of its prolongation, at one place. */
export function heightOf(piece: Piece, x: number): number {
  return piece.heightAtMean + piece.slope * (x - piece.meanX);
}

/** Variance of the height of a piece fitted freely, at one place, for unit scatter of the points. */
export function heightVariance(piece: Piece, x: number): number {
  return 1 / piece.points + (x - piece.meanX) ** 2 / piece.spreadX;
}

function stepAt(left: Piece, right: Piece, x: number): number {
  return heightOf(left, x) - heightOf(right, x);
}

function stepVariance(left: Piece, right: Piece, x: number): number {
  return heightVariance(left, x) + heightVariance(right, x);
}

/** Least squares with the two pieces made to meet at `x`: a linear constraint, by Lagrange's multiplier. */
function joinedAt(left: Piece, right: Piece, x: number): readonly [Piece, Piece] {
  const pull = stepAt(left, right, x) / stepVariance(left, right, x);
  return [pulled(left, x, -pull), pulled(right, x, pull)];
}

function pulled(piece: Piece, x: number, pull: number): Piece {
  return {
    ...piece,
    heightAtMean: piece.heightAtMean + pull / piece.points,
    slope: piece.slope + (pull * (x - piece.meanX)) / piece.spreadX,
  };
}

function lineThrough({ x, y, meanX, meanY, slope }: LevelledPoints, from: number, to: number): Piece {
  const points = to - from;
  const origin = x[from] as number;
  let sumX = 0;
  let sumH = 0;
  for (let index = from; index < to; index += 1) {
    const place = x[index] as number;
    sumX += place - origin;
    sumH += (y[index] as number) - meanY - slope * (place - meanX);
  }
  const middleX = sumX / points;
  const heightAtMean = sumH / points;
  let spreadX = 0;
  let spreadXH = 0;
  for (let index = from; index < to; index += 1) {
    const place = x[index] as number;
    const fromMiddle = place - origin - middleX;
    spreadX += fromMiddle * fromMiddle;
    spreadXH += fromMiddle * ((y[index] as number) - meanY - slope * (place - meanX) - heightAtMean);
  }
  return { points, meanX: origin + middleX, heightAtMean, slope: spreadXH / spreadX, spreadX };
}

function residuals(points: LevelledPoints, from: number, to: number, piece: Piece): number {
  const { x, y, meanX, meanY, slope } = points;
  const { meanX: middleX, heightAtMean, slope: ownSlope } = piece;
  let sum = 0;
  for (let index = from; index < to; index += 1) {
    const place = x[index] as number;
    const height = (y[index] as number) - meanY - slope * (place - meanX);
    const residual = height - heightAtMean - ownSlope * (place - middleX);
    sum += residual * residual;
  }
  return sum;
}
