import type { Comparison } from '../judgement/compare.js';
import type { Outcome } from '../judgement/decision.js';
import type { Verdict } from '../judgement/verdict.js';
import { modulesInWords } from './record-heading.js';
import { isWhole, type Result } from './result.js';

/** Two records understood and compared: everything that a report of it can say. */
export interface ComparedRecords {
  readonly before: Result;
  readonly after: Result;
  readonly tolerance: { readonly name: string; readonly title: string };
  readonly comparison: Comparison;
}

/**
 * Nobody knows what the missing part of a record would have shown, be it lost or never measured because the run was
 * stopped: so it can't say that nothing changed.
 */
export function outcomeOf({ before, after, comparison }: ComparedRecords): Outcome {
  const areWhole = isWhole(before) && isWhole(after);
  return comparison.outcome === 'conforms' && !areWhole ? 'undecided' : comparison.outcome;
}

/** `K1: what changed`; of different modules `K1 and K1+K2: what differs`. */
export function titleOf({ before, after, comparison }: ComparedRecords): string {
  const [then, now] = [modulesInWords(before.header), modulesInWords(after.header)];
  return comparison.sameModules ? `${now}: what changed` : `${then} and ${now}: what differs`;
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
