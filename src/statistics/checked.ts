import * as simple from 'simple-statistics';

import { requireFinite, UnfitDataError } from './unfit-data-error.js';

export { UnfitDataError } from './unfit-data-error.js';

// The only door to simple-statistics: what goes through has been compared with outside values, and
// empty or non-finite input is refused here, where the library would answer silently.

/** What the functions of this file take; none of them changes it. */
export type Values = readonly number[] | Float64Array;

/**
 * Arithmetic mean.
 * @throws UnfitDataError for no values or one that is not finite.
 * @example mean([1, 2, 6]); // => 3
 */
export function mean(values: Values): number {
  return simple.mean(fit('mean', values));
}

/**
 * Experimental standard deviation, with n − 1 in the denominator (JCGM 100:2008, 4.2.2).
 * @throws UnfitDataError for fewer than two values or one that is not finite.
 * @example sampleStandardDeviation([2, 4, 4, 4, 5, 5, 7, 9]); // => 2.138089935299395
 */
export function sampleStandardDeviation(values: Values): number {
  const sound = fit('sampleStandardDeviation', values);
  if (sound.length < 2) throw new UnfitDataError('sampleStandardDeviation', 'one value has no scatter');
  return simple.sampleStandardDeviation(sound);
}

/**
 * Median; the mean of the middle two when there is an even number of values.
 * @throws UnfitDataError for no values or one that is not finite.
 * @example median([3, 1, 2]); // => 2
 */
export function median(values: Values): number {
  return simple.median(fit('median', values));
}

/** The library asks for a mutable array by type only: it reads, and copies before it sorts. */
function fit(calculation: string, values: Values): number[] {
  requireFinite(calculation, values);
  return values as number[];
}
