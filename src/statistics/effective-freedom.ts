import { UnfitDataError } from './unfit-data-error.js';

/** One part of a combined uncertainty: a standard uncertainty in the unit of the result. */
export interface UncertainPart {
  readonly uncertainty: number;
  /** Positive, Infinity for one taken as known. */
  readonly degreesOfFreedom: number;
}

/**
 * Effective degrees of freedom of a combined standard uncertainty by the Welch–Satterthwaite formula
 * (JCGM 100:2008, G.4.1, equation G.2b): u⁴ / Σ uᵢ⁴/νᵢ. Not rounded. Infinity where nothing is
 * uncertain, or where all that is uncertain is taken as known.
 * @throws UnfitDataError for no components, a negative or missing uncertainty, or degrees of freedom
 * that are not positive.
 * @example effectiveDegreesOfFreedom([{ uncertainty: 1, degreesOfFreedom: 4 }, { uncertainty: 1, degreesOfFreedom: 4 }]); // => 8
 */
export function effectiveDegreesOfFreedom(components: readonly UncertainPart[]): number {
  if (components.length === 0)
    throw new UnfitDataError('effectiveDegreesOfFreedom', 'there are no components');
  for (const { uncertainty, degreesOfFreedom } of components) {
    if (!(uncertainty >= 0 && uncertainty < Infinity && degreesOfFreedom > 0)) {
      throw new UnfitDataError(
        'effectiveDegreesOfFreedom',
        `a component is ${uncertainty} with ${degreesOfFreedom} degrees of freedom`,
      );
    }
  }
  // Fourth powers of microvolts would come near the smallest doubles: only the ratios matter.
  const largest = components.reduce((most, { uncertainty }) => Math.max(most, uncertainty), 0);
  if (largest === 0) return Infinity;
  let variance = 0;
  let shared = 0;
  for (const { uncertainty, degreesOfFreedom } of components) {
    const share = (uncertainty / largest) ** 2;
    variance += share;
    shared += (share * share) / degreesOfFreedom;
  }
  return (variance * variance) / shared;
}
