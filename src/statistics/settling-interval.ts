import { rootBetween } from './root-search.js';
import { curveOfRate, settlingPoints, type CurveOfRate, type SettlingPoints } from './settling-curve.js';
import type { SettlingFit } from './settling-fit.js';
import { largestRate } from './settling-search.js';
import { coverageFactor } from './student-t.js';

/** How many places are looked at before the best is closed in on. */
const looks = 16;
/** How often the stretch is then cut: to 1e-7 of itself, and a summit's height is exact to the square of that. */
const sections = 29;
const golden = (Math.sqrt(5) - 1) / 2;

/**
 * Interval for the settled value by its profile: all values for which the best curve ending there has a
 * sum of squares of at most Q·(1 + F/(n − 3)), F being the quantile of F(1, n − 3) for the fraction
 * (D. M. Bates & D. G. Watts, Nonlinear Regression Analysis, 1988, chapter 6; from memory). Lopsided where
 * the data are cut short, and then truer than ± a multiple of the uncertainty. An end is ±Infinity when
 * the data do not exclude that the value goes on for ever, which is when a straight line is among the
 * curves that are good enough.
 *
 * At one rate κ the sum of squares is a parabola in the settled value, so the values allowed there are
 * E(κ) ± √(v(κ)·(limit − Q(κ))), and each end of the interval is the extreme of that over the rates around
 * the best one that are good enough: one search, linear in the points at each step. `t` and `y` are the
 * points that `fit` was made from.
 * @throws UnfitDataError for values that are not finite, t and y of different length, or a fraction not
 * from 0 to 1.
 */
export function settledInterval(
  t: ArrayLike<number>,
  y: ArrayLike<number>,
  fit: SettlingFit,
  fraction = 0.95,
): readonly [low: number, high: number] {
  const data = settlingPoints('settledInterval', t, y);
  const best = curveOfRate(data, data.span / fit.timeConstant);
  const rise = coverageFactor(fit.degreesOfFreedom, fraction) ** 2 / fit.degreesOfFreedom;
  const limit = best.sumOfSquares * (1 + rise);
  if (!(limit > best.sumOfSquares) || limit <= data.roundingOfSquares) return [fit.settled, fit.settled];
  const line = curveOfRate(data, 0);
  const lineAllowed = line.sumOfSquares <= limit;
  const reach = Math.sqrt(Math.max(0, limit - line.sumOfSquares) / line.spreadShape);
  const first = lowestRate(data, best, limit);
  const last = highestRate(data, best, limit);
  const end = (side: -1 | 1) => {
    // Barely bent curves of the steepest and the flattest allowed slope go up, or down, for ever.
    if (lineAllowed && side * line.gradient + reach > 0) return side * Infinity;
    const own = side * fit.settled;
    return (
      side *
      Math.max(
        own,
        highest((place) => reachAt(data, Math.exp(place), limit, side), first, last),
      )
    );
  };
  return [end(-1), end(1)];
}

/** How far the settled value may lie up (side 1) or down (side −1, its negative), at one rate. */
function reachAt(data: SettlingPoints, rate: number, limit: number, side: -1 | 1): number {
  const { gradient, meanShape, spreadShape, sumOfSquares } = curveOfRate(data, rate);
  const beyondMean = 1 / rate - meanShape;
  const variance = 1 / data.places.length + (beyondMean * beyondMean) / spreadShape;
  return (
    side * (data.meanHeight + gradient * beyondMean) + Math.sqrt(variance * Math.max(0, limit - sumOfSquares))
  );
}

/** Logarithm of the lowest rate, next to the best one, that is still good enough. */
function lowestRate(data: SettlingPoints, best: CurveOfRate, limit: number): number {
  return edgeOfAllowed(data, best, limit, -1, Math.log(best.rate) - 14);
}

/** Logarithm of the highest rate, next to the best one, that is still good enough. */
function highestRate(data: SettlingPoints, best: CurveOfRate, limit: number): number {
  return edgeOfAllowed(data, best, limit, 1, Math.log(largestRate(data)));
}

function edgeOfAllowed(
  data: SettlingPoints,
  best: CurveOfRate,
  limit: number,
  direction: -1 | 1,
  furthest: number,
): number {
  const excess = (place: number) => {
    const { rate, gradient, pull, sumOfSquares } = curveOfRate(data, Math.exp(place));
    return { value: sumOfSquares - limit, slope: -2 * rate * gradient * pull };
  };
  let inside = Math.log(best.rate);
  // Next to exact data, rounding alone may be over the limit.
  if (excess(inside).value >= 0) return inside;
  // As far as the limit would be if the sum of squares were a parabola, and no step without effect.
  const scale = Math.abs(best.gradient * best.rate);
  let stride = Math.max(1e-12, Math.sqrt((limit - best.sumOfSquares) / best.spreadBend) / scale);
  while ((furthest - inside) * direction > 0) {
    const next = direction * Math.min(direction * (inside + direction * stride), direction * furthest);
    if (excess(next).value > 0)
      return rootBetween(excess, Math.min(inside, next), Math.max(inside, next), 1e-12);
    inside = next;
    stride *= 1.5;
  }
  return inside;
}

/** The largest value of a function with one summit, over a stretch; a coarse look first, then golden sections. */
function highest(at: (place: number) => number, first: number, last: number): number {
  const placeOf = (look: number) => first + ((last - first) * look) / looks;
  const values = Array.from({ length: looks + 1 }, (_, look) => at(placeOf(look)));
  const top = values.indexOf(Math.max(...values));
  let low = placeOf(Math.max(0, top - 1));
  let high = placeOf(Math.min(looks, top + 1));
  let left = high - golden * (high - low);
  let right = low + golden * (high - low);
  let atLeft = at(left);
  let atRight = at(right);
  for (let section = 0; section < sections; section += 1) {
    if (atLeft > atRight) {
      high = right;
      right = left;
      atRight = atLeft;
      left = high - golden * (high - low);
      atLeft = at(left);
    } else {
      low = left;
      left = right;
      atLeft = atRight;
      right = low + golden * (high - low);
      atRight = at(right);
    }
  }
  return Math.max(atLeft, atRight, values[top] as number);
}
