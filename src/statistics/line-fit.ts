import { TooFewPointsError } from './too-few-points-error.js';
import { requireFinite, requireSameLength, UnfitDataError } from './unfit-data-error.js';

export { TooFewPointsError } from './too-few-points-error.js';

/** A straight line y = intercept + slope·x through scattered points, and how sure it is. */
export interface LineFit {
  readonly intercept: number;
  readonly slope: number;
  /** Standard uncertainties from the scatter of the residuals. */
  readonly interceptUncertainty: number;
  readonly slopeUncertainty: number;
  /** Of intercept and slope; their correlation follows from the places of the points alone. */
  readonly covariance: number;
  readonly correlation: number;
  /** Standard deviation of the residuals, n − 2 in the denominator. */
  readonly residualDeviation: number;
  readonly degreesOfFreedom: number;
  /** Of the residuals. */
  readonly sumOfSquares: number;
  readonly points: number;
  readonly meanX: number;
  readonly meanY: number;
  /** Sum of the squares of x − meanX. */
  readonly spreadX: number;
}

/**
 * Least-squares straight line, unweighted, with its uncertainties from the residuals
 * (JCGM 100:2008, H.3.2, equations H.13). All sums are taken about the means, so that a small scatter on
 * a large offset, and residuals small against the data, keep their digits. Three passes, no copies.
 * @throws TooFewPointsError for fewer than three points, or all x equal.
 * @throws UnfitDataError for values that are not finite, or x and y of different length.
 * @example fitLine([0, 1, 2, 3], [1, 3, 5, 7]).slope; // => 2
 */
export function fitLine(x: ArrayLike<number>, y: ArrayLike<number>): LineFit {
  const points = x.length;
  requireSameLength('fitLine', x, y);
  const originX = x[0] ?? 0;
  const originY = y[0] ?? 0;
  let sumX = 0;
  let sumY = 0;
  for (let index = 0; index < points; index += 1) {
    sumX += (x[index] as number) - originX;
    sumY += (y[index] as number) - originY;
  }
  if (!Number.isFinite(sumX + sumY)) refuse(x, y);
  if (points < 3) throw new TooFewPointsError({ points, needed: 3, allAtOnePlace: false });

  const middleX = sumX / points;
  const middleY = sumY / points;
  let spreadX = 0;
  let spreadXY = 0;
  for (let index = 0; index < points; index += 1) {
    const fromMiddle = (x[index] as number) - originX - middleX;
    spreadX += fromMiddle * fromMiddle;
    spreadXY += fromMiddle * ((y[index] as number) - originY - middleY);
  }
  if (!Number.isFinite(spreadX)) refuse(x, y);
  // The mean of equal values may miss them by a rounding; that is no spread.
  if (spreadX === 0 || sameEverywhere(x))
    throw new TooFewPointsError({ points, needed: 3, allAtOnePlace: true });

  const slope = spreadXY / spreadX;
  let sumOfSquares = 0;
  for (let index = 0; index < points; index += 1) {
    const residual =
      (y[index] as number) - originY - middleY - slope * ((x[index] as number) - originX - middleX);
    sumOfSquares += residual * residual;
  }
  return lineFrom({
    points,
    slope,
    meanX: originX + middleX,
    meanY: originY + middleY,
    spreadX,
    sumOfSquares,
  });
}

/**
 * The fitted line at one place, with the standard uncertainty of the mean line there: no scatter of a
 * further single reading is added (JCGM 100:2008, H.3.4 does this by the correlation; this is the same).
 */
export function predictLine(
  fit: LineFit,
  x: number,
): { readonly value: number; readonly uncertainty: number } {
  const fromMean = x - fit.meanX;
  return {
    value: fit.meanY + fit.slope * fromMean,
    uncertainty: fit.residualDeviation * Math.sqrt(1 / fit.points + (fromMean * fromMean) / fit.spreadX),
  };
}

/** The uncertainties that follow from a slope, the means, the spread of x and the residuals. */
export function lineFrom(found: {
  readonly points: number;
  readonly slope: number;
  readonly meanX: number;
  readonly meanY: number;
  readonly spreadX: number;
  readonly sumOfSquares: number;
}): LineFit {
  const { points, slope, meanX, meanY, spreadX, sumOfSquares } = found;
  const degreesOfFreedom = points - 2;
  const variance = sumOfSquares / degreesOfFreedom;
  const interceptShare = 1 / points + (meanX * meanX) / spreadX;
  return {
    intercept: meanY - slope * meanX,
    slope,
    interceptUncertainty: Math.sqrt(variance * interceptShare),
    slopeUncertainty: Math.sqrt(variance / spreadX),
    covariance: (-variance * meanX) / spreadX,
    correlation: -meanX / Math.sqrt(spreadX * interceptShare),
    residualDeviation: Math.sqrt(variance),
    degreesOfFreedom,
    sumOfSquares,
    points,
    meanX,
    meanY,
    spreadX,
  };
}

function sameEverywhere(x: ArrayLike<number>): boolean {
  for (let index = 1; index < x.length; index += 1) if (x[index] !== x[0]) return false;
  return true;
}

function refuse(x: ArrayLike<number>, y: ArrayLike<number>): never {
  requireFinite('fitLine, x', x);
  requireFinite('fitLine, y', y);
  throw new UnfitDataError('fitLine', 'the values are so large that their sums overflow');
}
