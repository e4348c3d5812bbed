import { normalDensity, normalDistribution, normalQuantile } from '../statistics/normal.js';
import { combine } from '../statistics/uncertainty-budget.js';
import { studentTDistribution } from '../statistics/student-t.js';
import { linesOf, sumOf } from './added-up.js';
import type { Estimate } from './build.js';
import type { Taken } from './module-profile.js';

/** The least of several measured numbers, and which it is. */
export interface Least {
  readonly estimate: Estimate;
  /** The place of the one that is least by what was measured, the first of equal ones. */
  readonly place: number;
  /** That it is this one, at least. */
  readonly probability: number;
}

/**
 * What the least of several measured numbers is, each distributed as its budget says: its median and the
 * interval from the 2.5 % to the 97.5 % quantile. Where two are close the least of them lies below both
 * values, as either may be the one.
 *
 * P(least > x) = Π over the clusters of ∫ φ(z)·Π_k P(x_k > x | z) dz, a cluster being those that share an error,
 * z that error. What not all of a cluster share counts as each one's own. The probability that it is the one
 * named is at least 1 − Σ P(x_j < x_k) (Boole), the shared errors falling out of each difference.
 * @param numbers at least one; of one that has a bound it is not known how much more it is.
 */
export function leastOf(numbers: readonly Taken[]): Least {
  const place = numbers.reduce(
    (least, { value }, index) => (value < (numbers[least]?.value ?? 0) ? index : least),
    0,
  );
  const least = numbers[place];
  if (least === undefined) throw new RangeError('the least of no numbers');
  const [low = 0, value = 0, high = 0] = quantilesOfLeast(numbers, [0.025, 0.5, 0.975]);
  const isOpen = numbers.some(({ bound, interval }) => bound === 'least' && interval[0] <= high);
  return {
    estimate: { value, low, high, ...(isOpen ? { bound: 'least' } : {}) },
    place,
    probability: least.bound === 'least' ? 0 : probabilityOf(least, numbers),
  };
}

function probabilityOf(least: Taken, numbers: readonly Taken[]): number {
  const others = numbers.filter((each) => each !== least);
  const missed = others.reduce((sum, other) => sum + probabilityBelow(other, least), 0);
  return Math.max(0, 1 - missed);
}

/** That `one` is in truth below `other`. */
export function probabilityBelow(one: Taken, other: Taken): number {
  const { value, budget } = sumOf([
    { taken: other, times: 1 },
    { taken: one, times: -1 },
  ]);
  const { standardUncertainty, degreesOfFreedom } = combine(budget);
  if (standardUncertainty === 0) return value > 0 ? 1 : value < 0 ? 0 : 0.5;
  return studentTDistribution(value / standardUncertainty, degreesOfFreedom);
}

/** One number as a normal one: what it shares with its cluster, and what is its own. */
interface Spread {
  readonly value: number;
  readonly common: number;
  readonly own: number;
}

/** So that the common error is integrated over in finite steps: own errors are no smaller beside it than this. */
const leastOwn = 0.02;

function quantilesOfLeast(numbers: readonly Taken[], shares: readonly number[]): readonly number[] {
  const clusters = clustersOf(numbers).map(spreadsOf);
  const all = clusters.flat();
  const reach = ({ common, own }: Spread): number => 8 * (common + own);
  const from = Math.min(...all.map((each) => each.value - reach(each)));
  const to = Math.min(...all.map((each) => each.value + reach(each)));
  const above = (at: number): number =>
    clusters.reduce((product, cluster) => product * probabilityAbove(cluster, at), 1);
  return shares.map((share) => {
    let low = from;
    let high = to;
    for (let halving = 0; halving < 40; halving += 1) {
      const middle = (low + high) / 2;
      if (above(middle) > 1 - share) low = middle;
      else high = middle;
    }
    return (low + high) / 2;
  });
}

const furthest = 5;
const steps = 160;

/** That all of a cluster are above a place; the sum over equal steps is exact for so smooth an integrand. */
function probabilityAbove(cluster: readonly Spread[], at: number): number {
  const allAbove = (z: number): number =>
    cluster.reduce((product, { value, common, own }) => {
      const distance = value + common * z - at;
      return product * (own === 0 ? Number(distance > 0) : normalDistribution(distance / own));
    }, 1);
  if (cluster.every(({ common }) => common === 0)) return allAbove(0);
  const width = (2 * furthest) / steps;
  let sum = 0;
  for (let step = 0; step <= steps; step += 1) {
    const z = -furthest + step * width;
    sum += normalDensity(z) * allAbove(z) * width;
  }
  return sum;
}

/** Those that share an error stand together; so do those that share one with one of them. */
function clustersOf(numbers: readonly Taken[]): readonly (readonly Taken[])[] {
  let clusters: { readonly keys: ReadonlySet<string>; readonly of: readonly Taken[] }[] = [];
  for (const number of numbers) {
    const keys = sharedBy(number);
    const akin = clusters.filter((cluster) => keys.some((key) => cluster.keys.has(key)));
    clusters = [
      ...clusters.filter((cluster) => !akin.includes(cluster)),
      {
        keys: new Set([...keys, ...akin.flatMap((cluster) => [...cluster.keys])]),
        of: [...akin.flatMap((cluster) => cluster.of), number],
      },
    ];
  }
  return clusters.map((cluster) => cluster.of);
}

function sharedBy(number: Taken): readonly string[] {
  return linesOf(number).flatMap(({ shared }) => (shared === undefined ? [] : [shared]));
}

function spreadsOf(cluster: readonly Taken[]): readonly Spread[] {
  const [first, ...others] = cluster.map(sharedBy);
  const common = new Set((first ?? []).filter((key) => others.every((keys) => keys.includes(key))));
  return cluster.map((number) => {
    const lines = linesOf(number);
    const { coverageFactor } = combine(lines);
    // As wide as Student's t makes it at 95 %.
    const widened = coverageFactor / normalQuantile(0.975);
    const size = (those: typeof lines): number =>
      widened * Math.hypot(...those.map(({ uncertainty }) => uncertainty));
    const isCommon = ({ shared }: (typeof lines)[number]): boolean =>
      cluster.length > 1 && shared !== undefined && common.has(shared);
    const together = size(lines.filter(isCommon));
    const own = size(lines.filter((line) => !isCommon(line)));
    return { value: number.value, common: together, own: Math.max(own, leastOwn * together) };
  });
}
