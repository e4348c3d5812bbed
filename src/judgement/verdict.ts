import type { Expected } from '../record/baseline.js';
import { expandedOf } from '../analysis/finding.js';
import { decide } from '../statistics/guarded-decision.js';
import type { Outcome } from './decision.js';
import { bothMeasured, type Comparable, type Difference, type Measured } from './difference.js';

/** What can be said of a finding that is in one of two records or in both. */
export type Verdict =
  | 'unchanged-within-tolerance'
  | 'unchanged'
  | 'changed'
  | 'cannot-tell'
  | 'only-before'
  | 'only-after'
  | 'not-compared';

export interface Judged {
  readonly verdict: Verdict;
  /** Whether it is as it should be. */
  readonly outcome: Outcome | 'not-judged';
  /** That the true difference is within the tolerance; null where there is nothing to compute it from. */
  readonly probability: number | null;
  /** What a reader must know besides; empty when there is nothing. */
  readonly note: string;
}

/** What became of a finding that both records have. */
export function judgeBoth(
  before: Comparable,
  after: Comparable,
  asked: {
    readonly expected: Expected | undefined;
    readonly difference: Difference | undefined;
    /** In the unit of the finding. */
    readonly tolerance: number | undefined;
  },
): Judged {
  const { expected, difference, tolerance } = asked;
  if (expected === undefined) return told('not-compared', 'not-judged');
  if (expected.kind === 'becomes') return judgeBecoming(before, after, expected.word);
  if (expected.kind === 'same') return judgeSame(before, after);
  const measured = bothMeasured(before, after);
  if (measured === undefined || difference === undefined || tolerance === undefined)
    return told('cannot-tell', 'undecided', 'they are not quantities of one kind');
  return judgeWithin(measured, difference, tolerance);
}

/** What is asked of a finding that only one record has can't be told, unless it has become something else. */
export function judgeOne(
  verdict: 'only-before' | 'only-after',
  finding: Comparable | undefined,
  expected: Expected | undefined,
): Judged {
  if (expected === undefined) return told(verdict, 'not-judged');
  const isNow = verdict === 'only-after' ? finding : undefined;
  if (isNow !== undefined && expected.kind === 'becomes' && isOther(isNow, expected.word))
    return told(verdict, 'does-not-conform', `it is ${String(isNow.value)}`);
  const missing = verdict === 'only-before' ? 'this time' : 'in the earlier record';
  return told(verdict, 'undecided', `was not found ${missing}`);
}

/**
 * The difference against its tolerance, guarded by its expanded uncertainty on both sides: unchanged where
 * |Δ| + U is within, changed where |Δ| − U is beyond, else it can't be told. Where one side's uncertainty is not
 * known there is no guard band, and nothing is decided without it.
 */
function judgeWithin(
  [before, after]: readonly [Measured, Measured],
  difference: Difference,
  tolerance: number,
): Judged {
  const known = [before, after].filter((finding) => expandedOf(finding) !== null).length;
  if (known === 1)
    return told('cannot-tell', 'undecided', 'its uncertainty is known in one of the two records only');
  const { outcome, probability } = decide({
    value: difference.value,
    standardUncertainty: difference.standardUncertainty ?? 0,
    expanded: difference.expanded ?? 0,
    requirement: { kind: 'between', least: -tolerance, most: tolerance },
  });
  const bounded = judgeBounds(before, after, { outcome, difference: difference.value });
  if (bounded !== undefined) return bounded;
  // A recommendation is a choice and has no distribution to be within: it is taken as it stands.
  return known === 0
    ? told(verdictOf[outcome], outcome, 'no uncertainty is known of it: taken as it stands')
    : { verdict: verdictOf[outcome], outcome, probability, note: '' };
}

const verdictOf = {
  conforms: 'unchanged-within-tolerance',
  'does-not-conform': 'changed',
  undecided: 'cannot-tell',
} as const satisfies Record<Outcome, Verdict>;

/**
 * A least value says only that it is not less: it may be anything above. So a later value that is lower
 * than an earlier least one has fallen for certain, a later least value that is higher than an earlier one
 * has risen for certain, and more can't be told of one. Of two least values this can be told: whether what
 * was shown then was shown again; for more, neither run went far enough. Undefined where none is one.
 */
function judgeBounds(
  before: Measured,
  after: Measured,
  { outcome, difference }: { readonly outcome: Outcome; readonly difference: number },
): Judged | undefined {
  if (before.bound === undefined && after.bound === undefined) return undefined;
  if (before.bound !== undefined && after.bound !== undefined) {
    return outcome === 'conforms'
      ? told(verdictOf.conforms, outcome, 'as far as both runs went: both are least values')
      : told('cannot-tell', 'undecided', 'both are least values, and the runs did not go equally far');
  }
  const certain = before.bound === undefined ? difference > 0 : difference < 0;
  if (outcome === 'does-not-conform' && certain) return told('changed', outcome);
  const side = before.bound === undefined ? 'this time' : 'in the earlier record';
  return told('cannot-tell', 'undecided', `it may be more: ${side} it is a least value`);
}

function judgeSame(before: Comparable, after: Comparable): Judged {
  if (isUndetermined(before) || isUndetermined(after))
    return told('cannot-tell', 'undecided', 'could not be told');
  return before.value === after.value && before.dimension === after.dimension
    ? told('unchanged', 'conforms')
    : told('changed', 'does-not-conform');
}

function judgeBecoming(before: Comparable, after: Comparable, word: string): Judged {
  const { verdict } = judgeSame(before, after);
  if (isOther(after, word)) return told(verdict, 'does-not-conform', `it is ${String(after.value)}`);
  if (verdict === 'cannot-tell') return told(verdict, 'undecided', 'could not be told');
  return told(verdict, 'conforms', verdict === 'unchanged' ? 'it was so before' : '');
}

function isOther(finding: Comparable, word: string): boolean {
  return !isUndetermined(finding) && finding.value !== word;
}

function isUndetermined({ value }: Comparable): boolean {
  return value === 'undetermined';
}

function told(verdict: Verdict, outcome: Judged['outcome'], note = ''): Judged {
  return { verdict, outcome, probability: null, note };
}
