import { rootBetween } from './root-search.js';
import { curveOfRate, type CurveOfRate, type SettlingPoints } from './settling-curve.js';

/** Steps of the first search, in the logarithm of the rate; minima of the sum of squares are wider. */
const step = 0.25;
/** A curve over a ten-thousandth of its time constant is a line to any instrument. */
const leastRate = 1e-4;

/**
 * The largest rate that is looked at: at the second time all but e⁻²⁰ of the change is over, and faster
 * curves are the same to the points.
 */
export function largestRate({ secondPlace }: SettlingPoints): number {
  return 20 / Math.max(secondPlace, 1e-9);
}

/** The best settling curve; `isStep` when it is the fastest that can be seen. */
export interface BentCurve {
  readonly curve: CurveOfRate;
  readonly isStep: boolean;
}

/** The settling curve with the least sum of squares, between all rates that can be told apart. */
export function bestBentCurve(points: SettlingPoints): BentCurve {
  const step = curveOfRate(points, largestRate(points));
  const curve = bestCurve(points);
  return curve === undefined || step.sumOfSquares <= curve.sumOfSquares
    ? { curve: step, isStep: true }
    : { curve, isStep: false };
}

/**
 * The least of the minima of the sum of squares, for rates from 1e-4 (in spans) to the largest
 * that can be seen; `undefined` when there is none between, so that a line or a step does better.
 *
 * Variable projection: for each rate the other two parameters have a closed form, and so has the
 * derivative of what is left (G. H. Golub & V. Pereyra, SIAM J. Numer. Anal. 10 (1973); from memory). A grid over
 * the logarithm of the rate brackets every minimum, and within a bracket the steps are those of
 * Gauss–Newton on all three parameters, with halving where they lead astray: the end is the exact optimum.
 */
function bestCurve(points: SettlingPoints): CurveOfRate | undefined {
  const first = Math.log(leastRate);
  const last = Math.log(largestRate(points));
  const cells = Math.ceil((last - first) / step);
  let best: CurveOfRate | undefined;
  let before = first;
  let falling = descent(points, before).value < 0;
  for (let cell = 1; cell <= cells; cell += 1) {
    const here = first + ((last - first) * cell) / cells;
    const value = descent(points, here).value;
    if (falling && value >= 0) {
      const place = rootBetween((logarithm) => descent(points, logarithm), before, here, 1e-15);
      const curve = curveOfRate(points, Math.exp(place));
      if (best === undefined || curve.sumOfSquares < best.sumOfSquares) best = curve;
    }
    before = here;
    falling = value < 0;
  }
  return best;
}

/** Half the derivative of the sum of squares by the logarithm of the rate, and Gauss–Newton's slope of it. */
function descent(points: SettlingPoints, logarithm: number) {
  const { rate, gradient, pull, spreadBend } = curveOfRate(points, Math.exp(logarithm));
  const scale = rate * gradient;
  return { value: -scale * pull, slope: scale * scale * spreadBend };
}
