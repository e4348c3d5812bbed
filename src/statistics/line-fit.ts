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
  const through = leastSquaresLine('fitLine', x, y);
  const { slope, meanX, meanY } = through;
  let sumOfSquares = 0;
  for (let index = 0; index < through.points; index += 1) {
    const residual = (y[index] as number) - meanY - slope * ((x[index] as number) - meanX);
    sumOfSquares += residual * residual;
  }
  return { ...through, ...uncertaintiesOf(through, sumOfSquares) };
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

/** A line, and how the points lie that it goes through; nothing yet on how well it fits. */
export type LeastSquaresLine = Pick<
  LineFit,
  'intercept' | 'slope' | 'points' | 'meanX' | 'meanY' | 'spreadX'
>;

/**
 * The least-squares line alone, in two passes. `calculation` is named in the errors, which are those of
 * `fitLine`.
 */
export function leastSquaresLine(
  calculation: string,
  x: ArrayLike<number>,
  y: ArrayLike<number>,
): LeastSquaresLine {
  requireSameLength(calculation, x, y);
  const points = x.length;
  const originX = x[0] ?? 0;
  const originY = y[0] ?? 0;
  let sumX = 0;
  let sumY = 0;
  for (let index = 0; index < points; index += 1) {
    sumX += (x[index] as number) - originX;
    sumY += (y[index] as number) - originY;
  }
  if (!Number.isFinite(sumX + sumY)) refuse(calculation, x, y);
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
  if (!Number.isFinite(spreadX + spreadXY)) refuse(calculation, x, y);
  if (spreadX === 0) throw new TooFewPointsError({ points, needed: 3, allAtOnePlace: true });
  const slope = spreadXY / spreadX;
  const meanX = originX + middleX;
  const meanY = originY + middleY;
  return { intercept: meanY - slope * meanX, slope, points, meanX, meanY, spreadX };
}

function uncertaintiesOf({ points, meanX, spreadX }: LeastSquaresLine, sumOfSquares: number) {
  const degreesOfFreedom = points - 2;
  const variance = sumOfSquares / degreesOfFreedom;
  const interceptShare = 1 / points + (meanX * meanX) / spreadX;
  return {
    interceptUncertainty: Math.sqrt(variance * interceptShare),
    slopeUncertainty: Math.sqrt(variance / spreadX),
    covariance: (-variance * meanX) / spreadX,
    correlation: -meanX / Math.sqrt(spreadX * interceptShare),
    residualDeviation: Math.sqrt(variance),
    degreesOfFreedom,
    sumOfSquares,
  };
}

function refuse(calculation: string, x: ArrayLike<number>, y: ArrayLike<number>): never {
  requireFinite(`${calculation}, x`, x);
  requireFinite(`${calculation}, y`, y);
  throw new UnfitDataError(calculation, 'the values are so large that their sums overflow');
}
