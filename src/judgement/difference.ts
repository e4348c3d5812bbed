import { expandedOf, type Finding } from '../analysis/finding.js';
import type { Dimension, Ratio } from '../quantity/quantity.js';

/** A finding as far as it can be compared; one that a record keeps of an earlier run is enough. */
export interface Comparable extends Pick<
  Finding,
  'name' | 'value' | 'dimension' | 'standardUncertainty' | 'interval' | 'note'
> {
  readonly bound?: 'least' | undefined;
}

/** A finding whose value is a number. */
export interface Measured extends Comparable {
  readonly value: number;
  readonly dimension: Dimension;
}

/** How far a finding is from what it was: later less earlier. */
export interface Difference {
  readonly value: number;
  /** That of a difference of temperatures is in K; all others are in the unit of the finding. */
  readonly dimension: Dimension;
  /** Null unless both sides have one. */
  readonly standardUncertainty: number | null;
  /** 95 %: U = √(U₁² + U₂²). Null unless both sides have one: half of it would promise too much. */
  readonly expanded: number | null;
  /** Δ/√(U₁² + U₂²); null where either uncertainty is not known, both are nothing, or one side is a bound only. */
  readonly normalizedError: number | null;
  /** Of the earlier value; null where that is not clearly other than nothing. */
  readonly share: Ratio | null;
}

/** The two findings as numbers of one dimension; undefined where they are not. */
export function bothMeasured(
  before: Comparable,
  after: Comparable,
): readonly [before: Measured, after: Measured] | undefined {
  return isMeasured(before) && isMeasured(after) && before.dimension === after.dimension
    ? [before, after]
    : undefined;
}

function isMeasured(finding: Comparable): finding is Measured {
  return typeof finding.value === 'number' && finding.dimension !== null;
}

/**
 * The difference with its uncertainty. Both uncertainties are taken as independent (JCGM 100:2008, 5.1.2).
 * Where both records were made with the same instruments part of their error is common to both and falls
 * out of the difference, so what is given is rather too wide: the cautious side. The normalized difference
 * E_n is that of comparisons between laboratories (ISO/IEC 17043, ISO 13528: satisfactory up to 1), and needs both
 * expanded uncertainties.
 */
export function differenceOf(before: Measured, after: Measured): Difference {
  const value = after.value - before.value;
  const expanded = together(expandedOf(before), expandedOf(after));
  const earlier = Math.abs(before.value);
  const bounded = before.bound !== undefined || after.bound !== undefined;
  return {
    value,
    dimension: before.dimension === 'temperature' ? 'temperature-difference' : before.dimension,
    standardUncertainty: together(before.standardUncertainty, after.standardUncertainty),
    expanded,
    normalizedError: bounded || expanded === null || expanded === 0 ? null : value / expanded,
    share: earlier > (expandedOf(before) ?? 0) ? value / earlier : null,
  };
}

/** Root of the sum of squares; where one of them is not known the sum is not either. */
function together(one: number | null, other: number | null): number | null {
  return one === null || other === null ? null : Math.hypot(one, other);
}
