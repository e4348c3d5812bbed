import { orderStatistic } from './order-statistic.js';
import { UnfitDataError } from './unfit-data-error.js';

/** What the draws of a result say of it. */
export interface DrawnResult {
  /** As many draws lie below as above. */
  readonly median: number;
  readonly low: number;
  readonly high: number;
}

/**
 * The probabilistically symmetric interval that covers 95 % of the draws of a result: as many lie below as
 * above it (JCGM 101:2008, 7.7.2: with M draws in rising order and q the integer part of pM + 1/2, from the
 * r-th to the (r + q)-th, r = (M − q)/2 or the integer part of (M − q + 1)/2).
 * @param draws without gaps; their order is lost.
 * @param count how many of the first of them count.
 * @throws UnfitDataError for no draws.
 */
export function coverageInterval(draws: Float64Array, count = draws.length, coverage = 0.95): DrawnResult {
  if (!(count > 0 && count <= draws.length)) {
    throw new UnfitDataError('coverageInterval', `there are ${count} draws`);
  }
  const covered = Math.floor(coverage * count + 0.5);
  const first = Math.max(1, Math.floor((count - covered + 1) / 2));
  const last = Math.min(count, first + covered);
  return {
    low: orderStatistic(draws, first - 1, count),
    median: orderStatistic(draws, Math.floor((count - 1) / 2), count),
    high: orderStatistic(draws, last - 1, count),
  };
}
