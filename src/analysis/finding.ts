import type { Dimension, Ratio } from '../quantity/quantity.js';
import { combine, type Contribution, interval } from '../statistics/uncertainty-budget.js';

/** A named result, and where it came from. */
export interface Finding {
  readonly name: string;
  /** In the unit of its dimension, or a word. */
  readonly value: number | string;
  readonly dimension: Dimension | null;
  readonly standardUncertainty: number | null;
  /** 95 %, by Student's t at the effective degrees of freedom. */
  readonly interval: readonly [number, number] | null;
  /** Set where the value is only a bound: `least` where nothing showed that it is not more. */
  readonly bound?: 'least';
  /** The step whose readings it rests on, counted from 1. */
  readonly step: number | null;
  /** What a reader must know besides; empty when there is nothing. */
  readonly note: string;
  readonly budget: readonly Contribution[];
  /** How a recommendation was worked out. */
  readonly factors: readonly Factor[];
}

/** One line of a derating: each factor multiplies, and says why. */
export interface Factor {
  readonly name: string;
  readonly factor: Ratio;
  readonly reason: string;
}

/** The finding of that name; undefined where it was not made. */
export function findingNamed(findings: readonly Finding[], name: string): Finding | undefined {
  return findings.find((finding) => finding.name === name);
}

/** The value of the finding of that name; undefined where it was not made, or is no number. */
export function numberNamed(findings: readonly Finding[], name: string): number | undefined {
  const value = findingNamed(findings, name)?.value;
  return typeof value === 'number' ? value : undefined;
}

/**
 * Expanded uncertainty, 95 %. Of an interval that reaches further to one side, that side's: what is judged or
 * written by one number must not promise more than the interval does. Null where there is no interval.
 */
export function expandedOf({ value, interval }: Pick<Finding, 'value' | 'interval'>): number | null {
  if (interval === null || typeof value !== 'number') return null;
  return Math.max(value - interval[0], interval[1] - value);
}

interface Circumstances {
  readonly step: number | null;
  readonly note?: string;
}

/** A measured quantity with its uncertainty worked out of the contributions (JCGM 100:2008, 5 and G.4). */
export function measured(
  name: string,
  dimension: Dimension,
  value: number,
  budget: readonly Contribution[],
  { step, note = '' }: Circumstances,
): Finding {
  const combined = combine(budget);
  return {
    name,
    value,
    dimension,
    standardUncertainty: combined.standardUncertainty,
    interval: interval(value, combined),
    step,
    note,
    budget,
    factors: [],
  };
}

export function inWords(name: string, word: string, { step, note = '' }: Circumstances): Finding {
  return {
    name,
    value: word,
    dimension: null,
    standardUncertainty: null,
    interval: null,
    step,
    note,
    budget: [],
    factors: [],
  };
}
