import { bestSplit } from './break-search.js';
import { fUpperTail } from './f-distribution.js';
import { leastSquaresLine, type LeastSquaresLine } from './line-fit.js';
import { sortedPoints } from './sorted-points.js';
import { fitAtSplit, heightOf, heightVariance, type Piece, type SplitFit } from './split-fit.js';
import type { LevelledPoints } from './stretches.js';
import { requireFinite, requireSameLength } from './unfit-data-error.js';

/** One of the two pieces, as a line y = intercept + slope·x with standard uncertainties. */
export interface BrokenLinePiece {
  readonly intercept: number;
  readonly interceptUncertainty: number;
  readonly slope: number;
  readonly slopeUncertainty: number;
  readonly points: number;
}

/** A continuous line of two pieces, y = a + b₁x + (b₂ − b₁)·max(x − ψ, 0). */
export interface BrokenLineFit {
  /** ψ, where the two pieces meet. */
  readonly breakpoint: number;
  readonly breakpointUncertainty: number;
  /** Height of the line at the break. */
  readonly valueAtBreak: number;
  readonly left: BrokenLinePiece;
  readonly right: BrokenLinePiece;
  /**
   * `crossing`: the pieces fitted apart cross between two points, and the break is there. `point`: the
   * best place is at a measured x, where the sum of squares has a corner and the uncertainty is a guide.
   */
  readonly placedBy: 'crossing' | 'point';
  /** Standard deviation of the residuals, n − 4 in the denominator. */
  readonly residualDeviation: number;
  /** Of the residuals. */
  readonly sumOfSquares: number;
  readonly degreesOfFreedom: number;
  /**
   * F = ((Q₁ − Q₂)/2)/(Q₂/(n − 4)), Q₁ of the single line and Q₂ of the broken one, and the probability p of
   * an F as large by chance at 2 and n − 4 degrees of freedom. Because the break was searched for, the
   * true probability is larger than p: hold it against a strict level (0.001 rather than 0.05).
   */
  readonly improvementOverLine: { readonly f: number; readonly p: number };
}

/**
 * Least-squares continuous line of two pieces, with the break searched exactly over all gaps between
 * points (see `bestSplit`), in time linear in the number of points as long as they need no comparing to be
 * brought in order (see `sortedPoints`).
 *
 * Standard uncertainties by linearisation about the optimum (Gauss–Newton covariance, n − 4 degrees of
 * freedom): the slopes as in a line through their own part, and for the break
 * u²(ψ) = s²·[v_left(ψ) + v_right(ψ)]/(b₂ − b₁)², v being the variance of a piece's height at ψ for unit scatter.
 *
 * Each piece holds at least two different x, so the break lies from the second different x to the last
 * but one, and at least five points at four different x are needed. `undefined` when there are fewer,
 * or when there is no break to be found: the points lie on one line as exactly as the numbers can say, or
 * no break brings the line closer to them.
 * @throws UnfitDataError for values that are not finite, or x and y of different length.
 * @example fitBrokenLine([0, 1, 2, 3, 4, 5], [0, 0, 0, 1, 2, 3])?.breakpoint; // => 2
 */
export function fitBrokenLine(x: ArrayLike<number>, y: ArrayLike<number>): BrokenLineFit | undefined {
  requireSameLength('fitBrokenLine', x, y);
  const sorted = sortedPoints(x, y);
  const [first, last] = admissibleSplits(sorted.x);
  if (x.length < 5 || last < first) {
    if (x.length > 0) requireFinite('fitBrokenLine, x', x);
    if (x.length > 0) requireFinite('fitBrokenLine, y', y);
    return undefined;
  }
  const line = leastSquaresLine('fitBrokenLine', sorted.x, sorted.y);
  const points = { ...sorted, meanX: line.meanX, meanY: line.meanY, slope: line.slope };
  const { split, sumOfSquaresOfLine } = bestSplit(points, first, last);
  if (split === undefined || isStraightToTheLastDigit(line, sumOfSquaresOfLine)) return undefined;
  const settled = fitAtSplit(points, split);
  const delicate = settled.sumOfSquares < 1e-6 * sumOfSquaresOfLine;
  const found = delicate ? polished(settled, points, first, last) : settled;
  if (found.left.slope === found.right.slope) return undefined;
  return described(found, line, sorted.x[0] as number, sumOfSquaresOfLine);
}

/** The broken line at one place. */
export function predictBrokenLine(fit: BrokenLineFit, x: number): number {
  const piece = x <= fit.breakpoint ? fit.left : fit.right;
  return fit.valueAtBreak + piece.slope * (x - fit.breakpoint);
}

/** First and last size of the left part for which both parts hold two different x; crossed over when there is none. */
function admissibleSplits(x: Float64Array): readonly [first: number, last: number] {
  let aboveLowest = 0;
  while (aboveLowest < x.length && x[aboveLowest] === x[0]) aboveLowest += 1;
  let belowHighest = x.length - 1;
  while (belowHighest >= 0 && x[belowHighest] === x[x.length - 1]) belowHighest -= 1;
  return [aboveLowest + 1, belowHighest];
}

/** Rounding each y to a double alone would leave residuals about as large as these. */
function isStraightToTheLastDigit(line: LeastSquaresLine, sumOfSquares: number): boolean {
  const sumOfSquaresOfY = line.points * line.meanY ** 2 + line.slope ** 2 * line.spreadX + sumOfSquares;
  return sumOfSquares <= (4 * Number.EPSILON) ** 2 * sumOfSquaresOfY;
}

/**
 * Where the data are all but free of scatter, neighbouring gaps differ by less than the rounding of the
 * running sums. Then the crossing of the pieces tells the right gap, and the exact sums confirm it.
 */
function polished(found: SplitFit, points: LevelledPoints, first: number, last: number): SplitFit {
  let best = found;
  while (best.placedBy === 'point') {
    const split = pointsUpTo(points.x, (points.x[0] as number) + best.crossingD);
    if (split < first || split > last || split === best.split) break;
    const next = fitAtSplit(points, split);
    if (next.sumOfSquares >= best.sumOfSquares) break;
    best = next;
  }
  return best;
}

/** How many of the ascending x are at most `place`. */
function pointsUpTo(x: Float64Array, place: number): number {
  let low = 0;
  let high = x.length;
  while (low < high) {
    const middle = (low + high) >>> 1;
    if ((x[middle] as number) <= place) low = middle + 1;
    else high = middle;
  }
  return low;
}

function described(
  found: SplitFit,
  line: LeastSquaresLine,
  firstX: number,
  sumOfSquaresOfLine: number,
): BrokenLineFit {
  const { breakD, left, right, sumOfSquares } = found;
  const degreesOfFreedom = line.points - 4;
  const variance = sumOfSquares / degreesOfFreedom;
  const f = sumOfSquares === 0 ? Infinity : Math.max(0, (sumOfSquaresOfLine - sumOfSquares) / 2 / variance);
  const breakVariance = variance * (heightVariance(left, breakD) + heightVariance(right, breakD));
  return {
    breakpoint: firstX + breakD,
    breakpointUncertainty: Math.sqrt(breakVariance) / Math.abs(right.slope - left.slope),
    valueAtBreak: heightOf(left, breakD) + line.meanY + line.slope * (firstX - line.meanX + breakD),
    left: pieceWithLine(left, line, firstX, variance),
    right: pieceWithLine(right, line, firstX, variance),
    placedBy: found.placedBy,
    residualDeviation: Math.sqrt(variance),
    sumOfSquares,
    degreesOfFreedom,
    improvementOverLine: { f, p: fUpperTail(f, 2, degreesOfFreedom) },
  };
}

/** Puts the overall line back under a piece. */
function pieceWithLine(
  piece: Piece,
  line: LeastSquaresLine,
  firstX: number,
  variance: number,
): BrokenLinePiece {
  const slope = line.slope + piece.slope;
  const height = piece.heightAtMean + line.meanY + line.slope * (firstX - line.meanX + piece.meanD);
  return {
    intercept: height - slope * (firstX + piece.meanD),
    interceptUncertainty: Math.sqrt(variance * heightVariance(piece, -firstX)),
    slope,
    slopeUncertainty: Math.sqrt(variance / piece.spreadD),
    points: piece.points,
  };
}
