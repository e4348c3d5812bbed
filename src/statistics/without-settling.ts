import { fUpperTail } from './f-distribution.js';
import { reversed, type CurveOfRate, type SettlingPoints } from './settling-curve.js';
import { bestBentCurve, type BentCurve } from './settling-search.js';

/**
 * No trend and no curve that stands out from the scatter. It says nothing of a change that is slow
 * against the time the data cover.
 */
export interface AlreadySettled {
  readonly kind: 'already-settled';
  readonly mean: number;
  /** Standard uncertainty of the mean, s/√n. */
  readonly uncertainty: number;
  /** Standard deviation about the mean, n − 1 in the denominator. */
  readonly residualDeviation: number;
  readonly degreesOfFreedom: number;
  readonly points: number;
}

/**
 * `too-few-points`: fewer than four, or at fewer than three different times.
 * `sudden`: all of the change lies between the first time and the second; leave out the first and look again.
 * `straight`: still moving, with no bend that could tell where it will end (also when cut short).
 * `accelerating`: bent away from settling; it moves faster and faster.
 * `turning`: it turns back, and no settling curve comes close to it.
 */
export type NoSettling =
  | {
      readonly kind: 'no-settling';
      readonly why: 'too-few-points' | 'sudden';
      readonly points: number;
    }
  | (Trend & {
      readonly kind: 'no-settling';
      readonly why: 'straight' | 'accelerating' | 'turning';
      readonly points: number;
    });

/** The straight line through all points. */
export interface Trend {
  /** Unit of y per unit of t. */
  readonly slope: number;
  readonly slopeUncertainty: number;
  /** Height of the line at the last time. */
  readonly last: number;
  readonly lastUncertainty: number;
}

type Sum = Pick<CurveOfRate, 'sumOfSquares'>;

/** More often than this, mere scatter must not be taken for a trend or a curve, nor a curve for a turn. */
const trendByChance = 0.01;
/** More often than this, a straight line must not be taken for a bent one. */
const bendByChance = 0.05;

/**
 * What the points do, if they do not settle; `undefined` if they do. `line` is the curve of rate 0, `bent`
 * the best settling one, which is the fastest of all when `isStep`.
 *
 * F tests against the scatter: neither line, nor parabola, nor curve explains more than chance would at
 * 1 % → already settled; no settling curve better than the line at 5 %, one-sided → no settling. Which
 * kind is then told by the same search in reversed time, for what accelerates settles backwards, and by
 * the parabola, for what turns back.
 */
export function withoutSettling(
  data: SettlingPoints,
  line: CurveOfRate,
  { curve: bent, isStep }: BentCurve,
): AlreadySettled | NoSettling | undefined {
  const points = data.places.length;
  const parabola = parabolaFrom(line);
  if (isFlat(data, line.sumOfSquares, Math.min(parabola.sumOfSquares, bent.sumOfSquares))) {
    return alreadySettled(data);
  }
  const turnsBack = parabola.turns && chanceOfBend(data, line, parabola) <= trendByChance;
  if (chanceOfBend(data, line, bent) > bendByChance) {
    const away = bestBentCurve(reversed(data)).curve;
    const accelerates = chanceOfBend(data, line, away) <= bendByChance;
    const turning = turnsBack && !(accelerates && isAsGood(data, away, parabola));
    const why = turning ? 'turning' : accelerates ? 'accelerating' : 'straight';
    return { kind: 'no-settling', why, ...trendOf(data, line), points };
  }
  if (turnsBack && !isAsGood(data, bent, parabola)) {
    return { kind: 'no-settling', why: 'turning', ...trendOf(data, line), points };
  }
  return isStep ? { kind: 'no-settling', why: 'sudden', points } : undefined;
}

/** No more than scatter about one level: by the line, which needs few points, and by what is bent. */
function isFlat(data: SettlingPoints, ofLine: number, ofBent: number): boolean {
  const points = data.places.length;
  const all = data.sumAboutMean;
  if (all <= data.roundingOfSquares) return true;
  const byLine = fUpperTail(Math.max(0, all - ofLine) / (ofLine / (points - 2)), 1, points - 2);
  const byBent = fUpperTail(Math.max(0, all - ofBent) / 2 / (ofBent / (points - 3)), 2, points - 3);
  return Math.min(byLine, byBent) > trendByChance;
}

/** Whether a curve leaves no significantly larger variance than a parabola, which has as many parameters. */
function isAsGood(data: SettlingPoints, curve: CurveOfRate, parabola: Sum): boolean {
  const freedom = data.places.length - 3;
  if (curve.sumOfSquares <= Math.max(parabola.sumOfSquares, data.roundingOfSquares)) return true;
  return fUpperTail(curve.sumOfSquares / parabola.sumOfSquares, freedom, freedom) >= trendByChance;
}

/** One-sided probability that a straight line with this scatter would seem bent as much, and that way. */
export function chanceOfBend(data: SettlingPoints, line: Sum, bent: Sum): number {
  if (line.sumOfSquares <= Math.max(data.roundingOfSquares, bent.sumOfSquares)) return 1;
  const freedom = data.places.length - 3;
  return fUpperTail((line.sumOfSquares - bent.sumOfSquares) / (bent.sumOfSquares / freedom), 1, freedom) / 2;
}

/** The best parabola: at rate 0 the bend of the settling curve is one, −s²/2 less its line. */
function parabolaFrom({ gradient, pull, spreadBend, turnAlongShape, sumOfSquares }: CurveOfRate) {
  const amount = pull / spreadBend;
  const slopeAtFirst = gradient - amount * turnAlongShape;
  const slopeAtLast = slopeAtFirst - amount;
  return {
    sumOfSquares: Math.max(0, sumOfSquares - pull * amount),
    turns: slopeAtFirst * slopeAtLast < 0,
  };
}

function alreadySettled({ places, meanHeight, sumAboutMean }: SettlingPoints): AlreadySettled {
  const points = places.length;
  const residualDeviation = Math.sqrt(sumAboutMean / (points - 1));
  return {
    kind: 'already-settled',
    mean: meanHeight,
    uncertainty: residualDeviation / Math.sqrt(points),
    residualDeviation,
    degreesOfFreedom: points - 1,
    points,
  };
}

function trendOf(data: SettlingPoints, line: CurveOfRate): Trend {
  const points = data.places.length;
  const variance = line.sumOfSquares / (points - 2);
  const fromMean = 1 - line.meanShape;
  return {
    slope: line.gradient / data.span,
    slopeUncertainty: Math.sqrt(variance / line.spreadShape) / data.span,
    last: data.meanHeight + line.gradient * fromMean,
    lastUncertainty: Math.sqrt(variance * (1 / points + (fromMean * fromMean) / line.spreadShape)),
  };
}
