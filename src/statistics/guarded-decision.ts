import { normalDistribution } from './normal.js';
import { studentTDistribution } from './student-t.js';
import { UnfitDataError } from './unfit-data-error.js';

/** What is asked of a value: a limit on one side, or one on each. */
export type Requirement =
  | { readonly kind: 'at-least' | 'at-most'; readonly limit: number }
  | { readonly kind: 'between'; readonly least: number; readonly most: number };

export interface GuardedValue {
  readonly value: number;
  readonly standardUncertainty: number;
  /** Expanded uncertainty at 95 %; it is the guard band. Infinity where nothing can be said. */
  readonly expanded: number;
  readonly requirement: Requirement;
  /** Of the standard uncertainty; when left out, the value is taken as normally distributed. */
  readonly degreesOfFreedom?: number;
}

export interface GuardedDecision {
  readonly outcome: 'conforms' | 'does-not-conform' | 'undecided';
  /** That the true value meets the requirement, from 0 to 1. */
  readonly probability: number;
}

/**
 * Decides whether a measured value meets a requirement, with a guard band as wide as its expanded
 * uncertainty on both sides of the limit (ILAC-G8:09/2019, non-binary statement with w = U; JCGM 106:2012,
 * clause 8, guarded acceptance and guarded rejection), and with the probability of conformity (clause 7; of
 * two limits 7.4). Between two limits that are closer than 2 U nothing can be accepted.
 *
 * The sources leave open where a value exactly on a border belongs. Here: on the acceptance limit
 * (limit − w for at-most) it conforms; on the rejection limit (limit + w) it is undecided, as only what
 * lies beyond is rejected. A value within a few roundings of a border is on it, so that 12.12 − 0.04
 * accepts 12.08. Without uncertainty nothing is undecided: on the limit conforms.
 * @throws UnfitDataError for a value or limit that is not finite, or a negative or missing uncertainty.
 * @example decide({ value: 4.2, standardUncertainty: 0.05, expanded: 0.1, requirement: { kind: 'at-least', limit: 4 } }).outcome; // => 'conforms'
 */
export function decide(measured: GuardedValue): GuardedDecision {
  requireSound(measured);
  const { expanded } = measured;
  const below = marginTo('at-most', measured);
  const above = marginTo('at-least', measured);
  // Positive on the good side of the limit, whichever side that is; of two limits the nearer one counts.
  const margin = Math.min(below, above);
  const rounding = roundingOf(measured);
  const probability = probabilityOfConformity(measured, { below, above, rounding });
  if (margin >= expanded - rounding) return { outcome: 'conforms', probability };
  if (margin < -expanded - rounding) return { outcome: 'does-not-conform', probability };
  return { outcome: 'undecided', probability };
}

/** How far the value is on the good side of its limit of this kind; Infinity where there is none. */
function marginTo(side: 'at-least' | 'at-most', { value, requirement }: GuardedValue): number {
  if (requirement.kind === 'between')
    return side === 'at-least' ? value - requirement.least : requirement.most - value;
  if (requirement.kind !== side) return Infinity;
  return side === 'at-least' ? value - requirement.limit : requirement.limit - value;
}

/** A few units in the last place of what was subtracted. */
function roundingOf({ value, requirement }: GuardedValue): number {
  const size =
    requirement.kind === 'between'
      ? Math.max(Math.abs(requirement.least), Math.abs(requirement.most))
      : Math.abs(requirement.limit);
  return 4 * Number.EPSILON * (Math.abs(value) + size);
}

function probabilityOfConformity(
  { standardUncertainty, degreesOfFreedom }: GuardedValue,
  { below, above, rounding }: { readonly below: number; readonly above: number; readonly rounding: number },
): number {
  if (standardUncertainty === 0) return Math.min(below, above) >= -rounding ? 1 : 0;
  const distribution = (deviations: number): number =>
    degreesOfFreedom === undefined
      ? normalDistribution(deviations)
      : studentTDistribution(deviations, degreesOfFreedom);
  // Of two tails the difference of the small ones is taken, which keeps its digits.
  const [near, far] = [Math.min(below, above), Math.max(below, above)];
  return (
    distribution(near / standardUncertainty) -
    (far === Infinity ? 0 : distribution(-far / standardUncertainty))
  );
}

function requireSound({ value, standardUncertainty, expanded, requirement }: GuardedValue): void {
  if (!Number.isFinite(value)) throw new UnfitDataError('decide', `the value is ${value}`);
  const limits = requirement.kind === 'between' ? [requirement.least, requirement.most] : [requirement.limit];
  for (const limit of limits) {
    if (!Number.isFinite(limit)) throw new UnfitDataError('decide', `the limit is ${limit}`);
  }
  if (requirement.kind === 'between' && requirement.least > requirement.most) {
    const { least, most } = requirement;
    throw new UnfitDataError('decide', `the limits are ${least} and ${most}, in the wrong order`);
  }
  if (!(standardUncertainty >= 0 && standardUncertainty < Infinity)) {
    throw new UnfitDataError('decide', `the standard uncertainty is ${standardUncertainty}`);
  }
  if (!(expanded >= 0)) throw new UnfitDataError('decide', `the expanded uncertainty is ${expanded}`);
}
