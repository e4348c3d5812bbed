import { sortedPoints } from './sorted-points.js';
import { requireFinite, requireSameLength, UnfitDataError } from './unfit-data-error.js';

/**
 * Points that settle, put so that sums keep their digits: places s = (t − firstTime)/span from 0 to 1,
 * heights about their mean.
 */
export interface SettlingPoints {
  readonly places: Float64Array;
  readonly heights: Float64Array;
  readonly firstTime: number;
  /** From the first time to the last; 0 when all are the same. */
  readonly span: number;
  readonly meanHeight: number;
  /** Of the heights about their mean. */
  readonly sumAboutMean: number;
  /** Place of the second different time: what settles much sooner cannot be seen. */
  readonly secondPlace: number;
  /** How many different times there are, counted up to three. */
  readonly differentTimes: number;
  /** Sums of squares below this are no more than the rounding of the values given. */
  readonly roundingOfSquares: number;
  /** Memory for one look at the points; holds nothing between two. */
  readonly scratch: { readonly shape: Float64Array; readonly turn: Float64Array };
}

/**
 * The best curve of one rate κ = span/τ: height = heightAtMean + gradient·(φ(s) − meanShape), with
 * φ(s) = (1 − e^(−κs))/κ. This φ is the straight line s at κ = 0, so nothing degenerates where a curve is
 * barely bent. Its gradient is the slope at the first point, per span.
 */
export interface CurveOfRate {
  readonly rate: number;
  readonly gradient: number;
  readonly meanShape: number;
  /** Sum of the squares of φ about its mean. */
  readonly spreadShape: number;
  /** ∂φ/∂κ: its mean, its part along φ, and the sum of squares of the rest, called the bend. */
  readonly meanTurn: number;
  readonly turnAlongShape: number;
  readonly spreadBend: number;
  /** Sum of residual × bend; the derivative of the sum of squares by κ is −2·gradient·pull, exactly. */
  readonly pull: number;
  readonly sumOfSquares: number;
}

/** @throws UnfitDataError for values that are not finite, or t and y of different length. */
export function settlingPoints(
  calculation: string,
  t: ArrayLike<number>,
  y: ArrayLike<number>,
): SettlingPoints {
  requireSameLength(calculation, t, y);
  if (t.length > 0) requireFinite(`${calculation}, t`, t);
  if (t.length > 0) requireFinite(`${calculation}, y`, y);
  const sorted = sortedPoints(t, y);
  const points = sorted.x.length;
  const firstTime = sorted.x[0] ?? 0;
  const span = (sorted.x[points - 1] ?? 0) - firstTime;
  const origin = sorted.y[0] ?? 0;
  const places = sorted.x.map((time) => (time - firstTime) / (span === 0 ? 1 : span));
  const meanHeight =
    points === 0 ? 0 : origin + sorted.y.reduce((sum, of) => sum + (of - origin), 0) / points;
  const heights = sorted.y.map((of) => of - meanHeight);
  const sumAboutMean = heights.reduce((sum, of) => sum + of * of, 0);
  const sumOfSquares = sumAboutMean + points * meanHeight * meanHeight;
  if (!Number.isFinite(sumOfSquares + span)) {
    throw new UnfitDataError(calculation, 'the values are so large that their sums overflow');
  }
  const secondPlace = places.find((place) => place > 0) ?? 0;
  return {
    places,
    heights,
    firstTime,
    span,
    meanHeight,
    sumAboutMean,
    secondPlace,
    differentTimes: points === 0 ? 0 : secondPlace === 0 ? 1 : secondPlace === 1 ? 2 : 3,
    roundingOfSquares: (4 * Number.EPSILON) ** 2 * sumOfSquares,
    scratch: { shape: new Float64Array(points), turn: new Float64Array(points) },
  };
}

/** The same points in reversed time. */
export function reversed(data: SettlingPoints): SettlingPoints {
  const places = data.places.map((place) => 1 - place).reverse();
  const secondPlace = places.find((place) => place > 0) ?? 0;
  return { ...data, places, heights: data.heights.toReversed(), secondPlace };
}

/** The best curve of one rate, zero or positive, by its closed form; three passes over the points. */
export function curveOfRate({ places, heights, scratch }: SettlingPoints, rate: number): CurveOfRate {
  const { shape, turn } = scratch;
  const points = places.length;
  let sumShape = 0;
  let sumTurn = 0;
  for (let index = 0; index < points; index += 1) {
    const place = places[index] as number;
    const risen = Math.expm1(-rate * place);
    const oneShape = shapeFrom(risen, rate, place);
    const oneTurn = turnFrom(risen, rate, place);
    shape[index] = oneShape;
    turn[index] = oneTurn;
    sumShape += oneShape;
    sumTurn += oneTurn;
  }
  const meanShape = sumShape / points;
  const meanTurn = sumTurn / points;
  let spreadShape = 0;
  let shapeWithHeight = 0;
  let shapeWithTurn = 0;
  for (let index = 0; index < points; index += 1) {
    const fromMean = (shape[index] as number) - meanShape;
    spreadShape += fromMean * fromMean;
    shapeWithHeight += fromMean * (heights[index] as number);
    shapeWithTurn += fromMean * ((turn[index] as number) - meanTurn);
  }
  const gradient = shapeWithHeight / spreadShape;
  const turnAlongShape = shapeWithTurn / spreadShape;
  let spreadBend = 0;
  let pull = 0;
  let sumOfSquares = 0;
  for (let index = 0; index < points; index += 1) {
    const fromMean = (shape[index] as number) - meanShape;
    const residual = (heights[index] as number) - gradient * fromMean;
    const bend = (turn[index] as number) - meanTurn - turnAlongShape * fromMean;
    spreadBend += bend * bend;
    pull += residual * bend;
    sumOfSquares += residual * residual;
  }
  return {
    rate,
    gradient,
    meanShape,
    spreadShape,
    meanTurn,
    turnAlongShape,
    spreadBend,
    pull,
    sumOfSquares,
  };
}

/** φ(s) = (1 − e^(−κs))/κ and ∂φ/∂κ at one place, which may be Infinity for a rate above zero. */
export function shapeAt(rate: number, place: number): { readonly shape: number; readonly turn: number } {
  if (place === Infinity) return { shape: 1 / rate, turn: -1 / (rate * rate) };
  const risen = Math.expm1(-rate * place);
  return { shape: shapeFrom(risen, rate, place), turn: turnFrom(risen, rate, place) };
}

function shapeFrom(risen: number, rate: number, place: number): number {
  return rate === 0 ? place : -risen / rate;
}

/** ∂φ/∂κ = s²·h(κs), h(u) = (u·e^(−u) + e^(−u) − 1)/u², which is −½ at 0: by its series where it would cancel. */
function turnFrom(risen: number, rate: number, place: number): number {
  const u = rate * place;
  if (Math.abs(u) > 0.25) return (u * (1 + risen) + risen) / (rate * rate);
  let sum = 0;
  for (let index = bendSeries.length - 1; index >= 0; index -= 1) {
    sum = sum * u + (bendSeries[index] as number);
  }
  return place * place * sum;
}

/** Coefficients of h: (−1)^(k−1)·(k − 1)/k! for k = 2, 3, …; the first left out is below 1e-17 at u = ¼. */
const bendSeries = [
  -1 / 2,
  2 / 6,
  -3 / 24,
  4 / 120,
  -5 / 720,
  6 / 5040,
  -7 / 40_320,
  8 / 362_880,
  -9 / 3_628_800,
  10 / 39_916_800,
  -11 / 479_001_600,
  12 / 6_227_020_800,
] as const;
