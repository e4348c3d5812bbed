import { effectiveDegreesOfFreedom } from './effective-freedom.js';
import { coverageFactor } from './student-t.js';
import { UnfitDataError } from './unfit-data-error.js';

/** One line of an uncertainty budget. */
export interface Contribution {
  readonly name: string;
  /** A: from the scatter of readings; B: from anything else (JCGM 100:2008, 4.2 and 4.3). */
  readonly kind: 'A' | 'B';
  /** Standard uncertainty, already multiplied by the sensitivity: in the unit of the result. */
  readonly uncertainty: number;
  /** Positive; Infinity for a type B value taken as known. */
  readonly degreesOfFreedom: number;
}

/** What a budget adds up to, before a coverage is asked for. */
export interface CombinedStandard {
  readonly standardUncertainty: number;
  readonly degreesOfFreedom: number;
}

/** What a budget adds up to; the expanded uncertainty covers 95 %. */
export interface CombinedUncertainty extends CombinedStandard {
  readonly coverageFactor: number;
  /** coverageFactor × standardUncertainty, about 95 % coverage. */
  readonly expanded: number;
}

/**
 * Combines contributions that are independent of each other: root of the sum of squares (JCGM 100:2008,
 * 5.1.2), effective degrees of freedom (G.4.1). For many budgets of which few are expanded: Student's t is most
 * of the work.
 * @throws UnfitDataError as `combine` does.
 */
export function combineStandard(contributions: readonly Contribution[]): CombinedStandard {
  const degreesOfFreedom = effectiveDegreesOfFreedom(contributions);
  return {
    standardUncertainty: Math.hypot(...contributions.map(({ uncertainty }) => uncertainty)),
    degreesOfFreedom,
  };
}

/**
 * The same with Student's t for 95 % (JCGM 100:2008, G.3.2) and the expanded uncertainty (6.2).
 * @throws UnfitDataError for no contributions, a negative or missing uncertainty, or degrees of freedom
 * that are not positive.
 */
export function combine(contributions: readonly Contribution[]): CombinedUncertainty {
  const { standardUncertainty, degreesOfFreedom } = combineStandard(contributions);
  const factor = coverageFactor(degreesOfFreedom);
  return {
    standardUncertainty,
    degreesOfFreedom,
    coverageFactor: factor,
    expanded: standardUncertainty === 0 ? 0 : factor * standardUncertainty,
  };
}

/** Expanded uncertainty for another coverage than 95 %, by Student's t (JCGM 100:2008, G.3.2). */
export function expandedFor(
  { standardUncertainty, degreesOfFreedom }: CombinedStandard,
  coverage: number,
): number {
  return standardUncertainty === 0 ? 0 : standardUncertainty * coverageFactor(degreesOfFreedom, coverage);
}

/**
 * Standard uncertainty of a value known only to lie within ± `halfWidth`, anywhere there alike:
 * halfWidth/√3 (JCGM 100:2008, 4.3.7).
 * @throws UnfitDataError for a negative or missing half-width.
 * @example rectangular(Math.sqrt(3)); // => 1
 */
export function rectangular(halfWidth: number): number {
  if (!(halfWidth >= 0 && halfWidth < Infinity)) {
    throw new UnfitDataError('rectangular', `the half-width is ${halfWidth}`);
  }
  return halfWidth / Math.sqrt(3);
}

/** The 95 % interval value ± expanded uncertainty, lower end first. */
export function interval(
  value: number,
  combined: Pick<CombinedUncertainty, 'expanded'>,
): readonly [low: number, high: number] {
  return [value - combined.expanded, value + combined.expanded];
}
