import { regularisedIncompleteBeta } from './incomplete-beta.js';
import { logBeta } from './log-gamma.js';
import { normalCentralProbability, normalDensity, normalDistribution, normalQuantile } from './normal.js';
import { rootBetween } from './root-search.js';
import { UnfitDataError } from './unfit-data-error.js';

// Beyond this the continued fraction takes long, and a transformation to a normal value is exact.
const nearlyNormal = 1e5;

/**
 * Probability that a value of Student's t distribution is at most `t`. `degreesOfFreedom` is positive,
 * need not be whole, and may be Infinity (the normal distribution). Relative error below 1e-12 in the
 * lower tail. Source: Abramowitz & Stegun 26.7.1 with 26.5.27; above 100 000 degrees of freedom
 * G. W. Hill's transformation (Communications of the ACM 13 (1970), Algorithm 395; from memory, checked with mpmath).
 * @throws UnfitDataError for NaN or degrees of freedom that are not positive.
 * @example studentTDistribution(1, 1); // => 0.75
 */
export function studentTDistribution(t: number, degreesOfFreedom: number): number {
  requireFreedom('studentTDistribution', degreesOfFreedom);
  if (Number.isNaN(t)) throw new UnfitDataError('studentTDistribution', 'the value is NaN');
  if (t === 0) return 0.5;
  const { tail } = halves(Math.abs(t), degreesOfFreedom);
  return t < 0 ? tail : 1 - tail;
}

/**
 * The value that Student's t stays below with probability `p`; the inverse of `studentTDistribution`.
 * 0 gives −∞ and 1 gives ∞.
 * @throws UnfitDataError for `p` outside 0 to 1 or degrees of freedom that are not positive.
 * @example studentTQuantile(0.975, 10); // => 2.228138851964938
 */
export function studentTQuantile(p: number, degreesOfFreedom: number): number {
  requireFreedom('studentTQuantile', degreesOfFreedom);
  if (!(p >= 0 && p <= 1)) {
    throw new UnfitDataError('studentTQuantile', `the probability is ${p}, not from 0 to 1`);
  }
  const away = p > 0.5 ? distance(1 - p, p - 0.5, degreesOfFreedom) : distance(p, 0.5 - p, degreesOfFreedom);
  return p > 0.5 ? away : away === 0 ? 0 : -away;
}

/**
 * The factor that turns a standard uncertainty into the half-width of an interval that covers the given
 * fraction (JCGM 100:2008, G.3 and Table G.2): two-sided Student's t. Degrees of freedom that are not
 * whole are used as they are (G.4.1 allows interpolation as well as truncation).
 * @throws UnfitDataError for a fraction outside 0 to 1 or degrees of freedom that are not positive.
 * @example coverageFactor(Infinity); // => 1.959963984540054
 */
export function coverageFactor(degreesOfFreedom: number, fraction = 0.95): number {
  requireFreedom('coverageFactor', degreesOfFreedom);
  if (!(fraction >= 0 && fraction <= 1)) {
    throw new UnfitDataError('coverageFactor', `the fraction is ${fraction}, not from 0 to 1`);
  }
  return distance((1 - fraction) / 2, fraction / 2, degreesOfFreedom);
}

/**
 * How far from 0 the tail beyond has the probability `tail`; `central` is what is missing to a half, and
 * is handed in because near the middle only it is exact. Solved in logarithms, where the tail is almost
 * a straight line however heavy it is.
 */
function distance(tail: number, central: number, degreesOfFreedom: number): number {
  if (tail === 0) return Infinity;
  if (central === 0) return 0;
  const normal = -normalQuantile(tail);
  if (degreesOfFreedom === Infinity) return normal;
  const byTail = tail < 0.25;
  const excess = (logarithm: number) => {
    const t = Math.exp(logarithm);
    const half = halves(t, degreesOfFreedom);
    const growth = t * density(t, degreesOfFreedom);
    return byTail
      ? { value: Math.log(tail / half.tail), slope: growth / half.tail }
      : { value: Math.log(half.central / central), slope: growth / half.central };
  };
  // Student's t has the heavier tails, so its quantile lies beyond the normal one.
  const low = Math.log(normal) - 1e-9;
  let width = 1e-3;
  while (excess(low + width).value < 0) {
    width *= 4;
    if (low + width > 709) return Infinity;
  }
  return Math.exp(rootBetween(excess, low, low + width, 1e-15));
}

/** The probability beyond `t` and that between 0 and `t`, t > 0; they add up to a half. */
function halves(t: number, degreesOfFreedom: number): { readonly tail: number; readonly central: number } {
  if (degreesOfFreedom > nearlyNormal) {
    const z = asNormal(t, degreesOfFreedom);
    return { tail: normalDistribution(-z), central: normalCentralProbability(z) };
  }
  const scaled = (t / degreesOfFreedom) * t;
  if (scaled > 1e300) return { tail: farTail(t, degreesOfFreedom), central: 0.5 };
  const x = 1 / (1 + scaled);
  const a = degreesOfFreedom / 2;
  // Whichever of the two the continued fraction gives directly; the other is then no small difference.
  if (x < (a + 1) / (a + 2.5)) {
    const tail = 0.5 * regularisedIncompleteBeta(x, a, 0.5, scaled * x);
    return { tail, central: 0.5 - tail };
  }
  const central = 0.5 * regularisedIncompleteBeta(scaled * x, 0.5, a, x);
  return { tail: 0.5 - central, central };
}

/** The tail where it is a plain power of t. */
function farTail(t: number, degreesOfFreedom: number): number {
  const a = degreesOfFreedom / 2;
  return (0.5 * Math.exp(a * Math.log(degreesOfFreedom) - 2 * a * Math.log(t) - logBeta(a, 0.5))) / a;
}

function density(t: number, degreesOfFreedom: number): number {
  if (degreesOfFreedom > nearlyNormal) return normalDensity(asNormal(t, degreesOfFreedom));
  const logScaled =
    (t / degreesOfFreedom) * t > 1e300 ? 2 * Math.log(t / Math.sqrt(degreesOfFreedom)) : undefined;
  return Math.exp(
    -logBeta(0.5, degreesOfFreedom / 2) -
      0.5 * Math.log(degreesOfFreedom) -
      0.5 * (degreesOfFreedom + 1) * (logScaled ?? Math.log1p((t / degreesOfFreedom) * t)),
  );
}

/** The normal value with the same probability beyond it, for many degrees of freedom (Hill 1970). */
function asNormal(t: number, degreesOfFreedom: number): number {
  if (degreesOfFreedom === Infinity) return t;
  const a = degreesOfFreedom - 0.5;
  const b = 48 * a * a;
  const y = a * Math.log1p((t / degreesOfFreedom) * t);
  const correction = ((((-0.4 * y - 3.3) * y - 24) * y - 85.5) / (0.8 * y * y + 100 + b) + y + 3) / b;
  return (1 + correction) * Math.sqrt(y);
}

function requireFreedom(calculation: string, degreesOfFreedom: number): void {
  if (degreesOfFreedom > 0) return;
  throw new UnfitDataError(calculation, `there are ${degreesOfFreedom} degrees of freedom`);
}
