import { UnfitDataError } from './unfit-data-error.js';

// Below this distance from the mean a series of positive terms is exact; beyond it a continued fraction is.
const seriesUpTo = 2;
const seriesTerms = 60;
const fractionTerms = 120;

/**
 * Probability that a standard normal value is at most `z`; relative error about 1e-15, in the far lower
 * tail too (down to 1e-308). Series: Abramowitz & Stegun 26.2.11; continued fraction: 26.2.14.
 * @throws UnfitDataError for NaN.
 * @example normalDistribution(-1.959963984540054); // => 0.025
 */
export function normalDistribution(z: number): number {
  if (Number.isNaN(z)) throw new UnfitDataError('normalDistribution', 'the value is NaN');
  if (Math.abs(z) <= seriesUpTo) return 0.5 + normalCentralProbability(z);
  return z < 0 ? farTail(-z) : 1 - farTail(z);
}

/** Density of the standard normal distribution, accurate to a few 1e-16 relative in the tails too. */
export function normalDensity(z: number): number {
  return Math.exp(-0.5 * z * z) * squareRounding(z) * (1 / Math.sqrt(2 * Math.PI));
}

/**
 * The value that a standard normal variable stays below with probability `p`, accurate to a few 1e-16
 * relative: a rational guess (Abramowitz & Stegun 26.2.23), then Halley's steps on the distribution itself.
 * 0 gives −∞ and 1 gives ∞.
 * @throws UnfitDataError for `p` outside 0 to 1.
 * @example normalQuantile(0.975); // => 1.959963984540054
 */
export function normalQuantile(p: number): number {
  if (!(p >= 0 && p <= 1))
    throw new UnfitDataError('normalQuantile', `the probability is ${p}, not from 0 to 1`);
  if (p > 0.5) return -normalQuantileOfLowerTail(1 - p, p - 0.5);
  return normalQuantileOfLowerTail(p, 0.5 - p);
}

/** `tail` is at most a half, `central` is what is missing to a half; both, because one of them is exact. */
function normalQuantileOfLowerTail(tail: number, central: number): number {
  if (tail === 0) return -Infinity;
  if (central === 0) return 0;
  const t = Math.sqrt(-2 * Math.log(tail));
  let distance =
    t - (2.515517 + t * (0.802853 + t * 0.010328)) / (1 + t * (1.432788 + t * (0.189269 + t * 0.001308)));
  for (let step = 0; step < 3; step += 1) {
    const excess =
      central < 0.25 ? central - normalCentralProbability(distance) : normalDistribution(-distance) - tail;
    const newton = excess / normalDensity(distance);
    if (!Number.isFinite(newton)) break;
    distance += newton / (1 - 0.5 * newton * distance);
  }
  return -distance;
}

/** Probability between the mean and `z`, negative for negative `z`; keeps its relative accuracy near 0. */
export function normalCentralProbability(z: number): number {
  if (Math.abs(z) > seriesUpTo) return Math.sign(z) * (0.5 - farTail(Math.abs(z)));
  let term = z;
  let sum = z;
  for (let n = 1; n <= seriesTerms; n += 1) {
    term *= (z * z) / (2 * n + 1);
    if (sum + term === sum) break;
    sum += term;
  }
  return sum * normalDensity(z);
}

/** Probability beyond `z`, z ≥ 2. */
function farTail(z: number): number {
  if (z === Infinity) return 0;
  let fraction = z;
  for (let n = fractionTerms; n >= 1; n -= 1) fraction = z + n / fraction;
  return normalDensity(z) / fraction;
}

/**
 * exp(−(z² − the double nearest to z²)/2): far out the rounding of the square alone would cost three
 * digits. The exact remainder of the square comes from Dekker's splitting of z in two halves.
 */
function squareRounding(z: number): number {
  if (Math.abs(z) > 40) return 1;
  const widened = 134217729 * z;
  const upper = widened - (widened - z);
  const lower = z - upper;
  const remainder = upper * upper - z * z + 2 * upper * lower + lower * lower;
  return 1 - 0.5 * remainder;
}
