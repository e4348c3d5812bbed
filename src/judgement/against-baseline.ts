import type { Finding } from '../analysis/finding.js';
import type { RunHeader } from '../record/run-header.js';
import { changeInWords, requirementInWords } from './change-in-words.js';
import { changesMissed, type Compared, compareWithBaseline } from './compare.js';
import type { Decision } from './decision.js';

/**
 * A decision for each finding of which the baseline's tolerance asks something; none where there is no
 * baseline. What must not change is asked only of what was found now or then.
 */
export function judgeAgainstBaseline(header: RunHeader, findings: readonly Finding[]): readonly Decision[] {
  const comparison = compareWithBaseline(header, findings);
  if (comparison === undefined) return [];
  const missed = changesMissed(comparison.inNeither).map(({ finding, word }): Decision => ({
    finding,
    requirement: `becomes ${word}`,
    outcome: 'undecided',
    probability: null,
    note: 'was not found, neither now nor in the baseline',
  }));
  return [...comparison.findings.flatMap(decisionOf), ...missed];
}

function decisionOf(compared: Compared): readonly Decision[] {
  const { finding, expected, outcome, probability } = compared;
  if (expected === undefined || outcome === 'not-judged') return [];
  const change = changeInWords(compared);
  const moved = compared.difference === undefined || change === '' ? change : `moved by ${change}`;
  const note = [moved, compared.note].filter((part) => part !== '').join('; ');
  return [{ finding, requirement: requirementInWords(expected, compared), outcome, probability, note }];
}
