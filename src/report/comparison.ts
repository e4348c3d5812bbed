import type { Comparison } from '../judgement/compare.js';
import type { Outcome } from '../judgement/decision.js';
import type { Verdict } from '../judgement/verdict.js';
import type { Result } from './result.js';

/** Two records understood and compared: everything that a report of it can say. */
export interface ComparedRecords {
  readonly before: Result;
  readonly after: Result;
  readonly tolerance: { readonly name: string; readonly title: string };
  readonly comparison: Comparison;
}

/** Nobody knows what the missing part of a record would have shown, so it can't say that nothing changed. */
export function outcomeOf({ before, after, comparison }: ComparedRecords): Outcome {
  const whole = before.integrity.kind === 'whole' && after.integrity.kind === 'whole';
  return comparison.outcome === 'conforms' && !whole ? 'undecided' : comparison.outcome;
}

/** What became of a finding, by the tolerance. */
export const verdictWords: Readonly<Record<Verdict, string>> = {
  'unchanged-within-tolerance': 'unchanged within tolerance',
  unchanged: 'unchanged',
  changed: 'changed',
  'cannot-tell': 'cannot tell',
  'only-before': 'only before',
  'only-after': 'only after',
  'not-compared': 'not compared',
};
