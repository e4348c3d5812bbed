import { normalDistribution } from './normal.js';
import { studentTDistribution } from './student-t.js';
import { UnfitDataError } from './unfit-data-error.js';

/** What is asked of a value: one limit, on one side. */
export interface Requirement {
  readonly kind: 'at-least' | 'at-most';
  readonly limit: number;
}

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
 * clause 8, guarded acceptance and guarded rejection), and with the probability of conformity (clause 7).
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
  const { value, expanded, requirement } = measured;
  // Positive on the good side of the limit, whichever side that is.
  const margin = requirement.kind === 'at-least' ? value - requirement.limit : requirement.limit - value;
  const rounding = 4 * Number.EPSILON * (Math.abs(value) + Math.abs(requirement.limit));
  const probability = probabilityOfConformity(measured, margin, rounding);
  if (margin >= expanded - rounding) return { outcome: 'conforms', probability };
  if (margin < -expanded - rounding) return { outcome: 'does-not-conform', probability };
  return { outcome: 'undecided', probability };
}

function probabilityOfConformity(measured: GuardedValue, margin: number, rounding: number): number {
  const { standardUncertainty, degreesOfFreedom } = measured;
  if (standardUncertainty === 0) return margin >= -rounding ? 1 : 0;
  const deviations = margin / standardUncertainty;
  return degreesOfFreedom === undefined
    ? normalDistribution(deviations)
    : studentTDistribution(deviations, degreesOfFreedom);
}

function requireSound({ value, standardUncertainty, expanded, requirement }: GuardedValue): void {
  if (!Number.isFinite(value)) throw new UnfitDataError('decide', `the value is ${value}`);
  if (!Number.isFinite(requirement.limit))
    throw new UnfitDataError('decide', `the limit is ${requirement.limit}`);
  if (!(standardUncertainty >= 0 && standardUncertainty < Infinity)) {
    throw new UnfitDataError('decide', `the standard uncertainty is ${standardUncertainty}`);
  }
  if (!(expanded >= 0)) throw new UnfitDataError('decide', `the expanded uncertainty is ${expanded}`);
}
