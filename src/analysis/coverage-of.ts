import { combine } from '../statistics/uncertainty-budget.js';
import { expandedOf, type Finding } from './finding.js';

/** How many standard uncertainties the expanded uncertainty of a finding is, and by which degrees of freedom. */
export interface Coverage {
  /** Student's t for 95 % (JCGM 100:2008, G.3.2). */
  readonly factor: number;
  /** Effective, by Welch–Satterthwaite; Infinity where all that counts is taken as known. */
  readonly degreesOfFreedom: number;
}

/** What adding and multiplying lose. */
const tiny = 1e-9;

/**
 * The coverage factor by which a finding's interval was made of its budget. Undefined where it was made in
 * another way: an interval that is longer to one side is no number of standard uncertainties.
 */
export function coverageOf({ value, interval, budget }: Finding): Coverage | undefined {
  const expanded = expandedOf({ value, interval });
  if (budget.length === 0 || expanded === null || interval === null || typeof value !== 'number')
    return undefined;
  const combined = combine(budget);
  const byBudget = [value - combined.expanded, value + combined.expanded];
  const isByBudget = byBudget.every(
    (end, index) => Math.abs(end - (interval[index] ?? Number.NaN)) <= tiny * (Math.abs(value) + expanded),
  );
  return isByBudget
    ? { factor: combined.coverageFactor, degreesOfFreedom: combined.degreesOfFreedom }
    : undefined;
}
