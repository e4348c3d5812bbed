import { orderStatistic } from './order-statistic.js';
import { UnfitDataError } from './unfit-data-error.js';

/** Between what the draws of a result lie. */
export interface DrawnInterval {
  readonly low: number;
  readonly high: number;
}

/**
 * The probabilistically symmetric interval that covers 95 % of the draws of a result: as many lie below as
 * above it (JCGM 101:2008, 7.7.2: with M draws in rising order and q the integer part of pM + 1/2, from the
 * r-th to the (r + q)-th, r = (M − q)/2 or the integer part of (M − q + 1)/2).
 *
 * The draws are not put in order for that: they are counted into bins, and only what shares a bin with the one
 * that is looked for is looked at again.
 * @param draws all of them finite.
 * @param count how many of the first of them count.
 * @throws UnfitDataError for no draws.
 */
export function coverageInterval(draws: Float64Array, count = draws.length, coverage = 0.95): DrawnInterval {
  if (!(count > 0 && count <= draws.length)) {
    throw new UnfitDataError('coverageInterval', `there are ${count} draws`);
  }
  const covered = Math.floor(coverage * count + 0.5);
  const first = Math.max(1, Math.floor((count - covered + 1) / 2));
  const last = Math.min(count, first + covered);
  const binned = bin(draws, count);
  return { low: within(draws, count, binned, first - 1), high: within(draws, count, binned, last - 1) };
}

/** As many draws lie below it as above; of two in the middle the lower. */
export function medianOf(draws: Float64Array): number {
  const { length } = draws;
  return within(draws, length, bin(draws, length), Math.floor((length - 1) / 2));
}

const bins = 512;

interface Binned {
  readonly lowest: number;
  /** Bins for each unit of the draws; 0 where all are the same. */
  readonly scale: number;
  readonly counts: Uint32Array;
}

function bin(draws: Float64Array, count: number): Binned {
  let lowest = Number.POSITIVE_INFINITY;
  let highest = Number.NEGATIVE_INFINITY;
  for (let draw = 0; draw < count; draw += 1) {
    const value = draws[draw] as number;
    if (value < lowest) lowest = value;
    if (value > highest) highest = value;
  }
  const width = highest - lowest;
  const scale = width > 0 && Number.isFinite(bins / width) ? (bins * (1 - Number.EPSILON)) / width : 0;
  const counts = new Uint32Array(bins);
  for (let draw = 0; draw < count; draw += 1) {
    const place = binOf(draws[draw] as number, lowest, scale);
    counts[place] = (counts[place] as number) + 1;
  }
  return { lowest, scale, counts };
}

function binOf(value: number, lowest: number, scale: number): number {
  // Towards 0, as the bits have it: none lies below the lowest.
  const place = ((value - lowest) * scale) | 0;
  return place < bins ? place : bins - 1;
}

/** The value at that place (from 0) if they were sorted. */
function within(
  draws: Float64Array,
  count: number,
  { lowest, scale, counts }: Binned,
  place: number,
): number {
  let before = 0;
  let chosen = 0;
  while (chosen < bins - 1 && before + (counts[chosen] as number) <= place) {
    before += counts[chosen] as number;
    chosen += 1;
  }
  const alike = new Float64Array(counts[chosen] as number);
  let found = 0;
  for (let draw = 0; draw < count; draw += 1) {
    const value = draws[draw] as number;
    if (binOf(value, lowest, scale) !== chosen) continue;
    alike[found] = value;
    found += 1;
  }
  return orderStatistic(alike, place - before);
}
