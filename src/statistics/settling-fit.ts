import {
  curveOfRate,
  settlingPoints,
  shapeAt,
  type CurveOfRate,
  type SettlingPoints,
} from './settling-curve.js';
import { bestBentCurve } from './settling-search.js';
import { UnfitDataError } from './unfit-data-error.js';
import { chanceOfBend, withoutSettling, type AlreadySettled, type NoSettling } from './without-settling.js';

export type { AlreadySettled, NoSettling, Trend } from './without-settling.js';

/** Three numbers in the order settled, start, timeConstant. */
type Triple = readonly [settled: number, start: number, timeConstant: number];

/** What points over time do: they settle, they have settled before, or they show no settling. */
export type SettlingOutcome = SettlingFit | AlreadySettled | NoSettling;

/** An exponential settling, y(t) = settled + (start − settled)·exp(−(t − startTime)/timeConstant). */
export interface SettlingFit {
  readonly kind: 'settling';
  /** Where it goes; in the unit of y. */
  readonly settled: number;
  readonly settledUncertainty: number;
  /** Value at `startTime`. */
  readonly start: number;
  readonly startUncertainty: number;
  /** τ, above 0; in the unit of t. */
  readonly timeConstant: number;
  readonly timeConstantUncertainty: number;
  /** Of settled, start and timeConstant, in this order. */
  readonly covariance: readonly [Triple, Triple, Triple];
  readonly startTime: number;
  /** Standard deviation of the residuals, n − 3 in the denominator. */
  readonly residualDeviation: number;
  /**
   * Of residuals that follow each other in time: about 0 ± 1/√n where the model holds. Near 1 the curve is
   * no single exponential, or the readings are not independent; the uncertainties are then too small.
   */
  readonly residualCorrelation: number;
  /** Of the residuals. */
  readonly sumOfSquares: number;
  readonly degreesOfFreedom: number;
  readonly points: number;
  /** One-sided probability that a straight line would look bent towards a settled value as much as this. */
  readonly straightByChance: number;
}

/**
 * Exponential settling by least squares over settled value, start and time constant, unweighted; points
 * in any order. Time constants from a twentieth of the first step in time to ten thousand times the whole
 * span are searched, and the result is the exact optimum; each step of the search is linear in the points.
 *
 * Standard uncertainties from the linearised covariance s²·(JᵀJ)⁻¹ with n − 3 degrees of freedom
 * (D. M. Bates & D. G. Watts, Nonlinear Regression Analysis, 1988; from memory). Where the data are cut
 * short the truth is lopsided: `settledInterval` says how far. What does not settle is told apart before
 * (see `withoutSettling`).
 *
 * `startTime`, 0 unless given, is when the settling began, in the time of t; `start` is the value then.
 * @throws UnfitDataError for values that are not finite, t and y of different length, or a start so many
 * time constants before the first point that it is beyond all numbers.
 * @example fitSettling([0, 1, 2, 3], [0, 8, 12, 14]); // => settled 16, start 0, timeConstant 1/ln 2
 */
export function fitSettling(
  t: ArrayLike<number>,
  y: ArrayLike<number>,
  { startTime = 0 }: { readonly startTime?: number } = {},
): SettlingOutcome {
  const data = settlingPoints('fitSettling', t, y);
  const points = data.places.length;
  if (points < 4 || data.differentTimes < 3) return { kind: 'no-settling', why: 'too-few-points', points };
  const line = curveOfRate(data, 0);
  const bent = bestBentCurve(data);
  return (
    withoutSettling(data, line, bent) ??
    described(data, bent.curve, startTime, chanceOfBend(data, line, bent.curve))
  );
}

function described(
  data: SettlingPoints,
  curve: CurveOfRate,
  startTime: number,
  straightByChance: number,
): SettlingFit {
  const points = data.places.length;
  const degreesOfFreedom = points - 3;
  const residualDeviation = Math.sqrt(curve.sumOfSquares / degreesOfFreedom);
  const startPlace = (startTime - data.firstTime) / data.span;
  const settled = heightAt(data, curve, Infinity);
  const start = heightAt(data, curve, startPlace);
  const timeConstant = data.span / curve.rate;
  // What each parameter owes to the three coordinates that are independent of each other: the mean
  // height, the gradient, and the bend.
  const deviations = [
    residualDeviation / Math.sqrt(points),
    residualDeviation / Math.sqrt(curve.spreadShape),
    residualDeviation / Math.sqrt(curve.spreadBend),
  ] as const;
  const root = [
    scaled(heightSensitivities(curve, Infinity), deviations),
    scaled(heightSensitivities(curve, startPlace), deviations),
    scaled([0, 0, -timeConstant / (curve.rate * curve.gradient)], deviations),
  ] as const;
  const covariance = [timesAll(root[0], root), timesAll(root[1], root), timesAll(root[2], root)] as const;
  if (!covariance.flat().every(Number.isFinite)) {
    const before = (data.firstTime - startTime) / timeConstant;
    throw new UnfitDataError('fitSettling', `the start lies ${before} time constants before the first point`);
  }
  return {
    kind: 'settling',
    settled,
    settledUncertainty: Math.hypot(...root[0]),
    start,
    startUncertainty: Math.hypot(...root[1]),
    timeConstant,
    timeConstantUncertainty: Math.hypot(...root[2]),
    covariance,
    startTime,
    residualDeviation,
    residualCorrelation: residualCorrelation(data, curve),
    sumOfSquares: curve.sumOfSquares,
    degreesOfFreedom,
    points,
    straightByChance,
  };
}

function heightAt(data: SettlingPoints, curve: CurveOfRate, place: number): number {
  return data.meanHeight + curve.gradient * (shapeAt(curve.rate, place).shape - curve.meanShape);
}

function heightSensitivities(curve: CurveOfRate, place: number): Triple {
  const { shape, turn } = shapeAt(curve.rate, place);
  const fromMean = shape - curve.meanShape;
  return [1, fromMean, turn - curve.meanTurn - curve.turnAlongShape * fromMean];
}

function residualCorrelation({ places, heights }: SettlingPoints, curve: CurveOfRate): number {
  let before = 0;
  let together = 0;
  for (let index = 0; index < places.length; index += 1) {
    const { shape } = shapeAt(curve.rate, places[index] as number);
    const residual = (heights[index] as number) - curve.gradient * (shape - curve.meanShape);
    together += before * residual;
    before = residual;
  }
  return curve.sumOfSquares === 0 ? 0 : together / curve.sumOfSquares;
}

function scaled(of: Triple, by: Triple): Triple {
  return [of[0] * by[0], of[1] * by[1], of[2] * by[2]];
}

function product(one: Triple, other: Triple): number {
  return one[0] * other[0] + one[1] * other[1] + one[2] * other[2];
}

function timesAll(one: Triple, rows: readonly [Triple, Triple, Triple]): Triple {
  return [product(one, rows[0]), product(one, rows[1]), product(one, rows[2])];
}
