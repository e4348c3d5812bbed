import { regularisedIncompleteBeta } from './incomplete-beta.js';
import { UnfitDataError } from './unfit-data-error.js';

/**
 * Probability that a variance ratio with the given degrees of freedom is larger than `f` by chance:
 * the upper tail of the F distribution (Abramowitz & Stegun 26.6.2), accurate in the tail too.
 * @throws UnfitDataError for a negative or missing ratio, or degrees of freedom that are not positive.
 */
export function fUpperTail(f: number, numeratorFreedom: number, denominatorFreedom: number): number {
  if (!(f >= 0 && numeratorFreedom > 0 && denominatorFreedom > 0)) {
    throw new UnfitDataError(
      'fUpperTail',
      `the ratio is ${f} at ${numeratorFreedom} and ${denominatorFreedom} degrees of freedom`,
    );
  }
  if (f === Infinity) return 0;
  const share = (numeratorFreedom * f) / denominatorFreedom;
  const x = 1 / (1 + share);
  return regularisedIncompleteBeta(x, denominatorFreedom / 2, numeratorFreedom / 2, share * x);
}
