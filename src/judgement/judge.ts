import { expandedOf, type Finding, findingNamed } from '../analysis/finding.js';
import type { RunHeader } from '../record/run-header.js';
import { effectiveDegreesOfFreedom } from '../statistics/effective-freedom.js';
import { decide } from '../statistics/guarded-decision.js';
import { judgeAgainstBaseline } from './against-baseline.js';
import type { Decision } from './decision.js';
import { type Limit, limitOf, limitInWords } from './limit.js';

export { overall, type Decision, type Outcome } from './decision.js';

/**
 * Decides each criterion of the record's procedure, with a guard band as wide as the expanded
 * uncertainty, and after them what must or must not have changed since the baseline, where there is one. A
 * finding that was not made leaves its criterion undecided.
 */
export function judge(header: RunHeader, findings: readonly Finding[]): readonly Decision[] {
  const required = header.criteria.map(({ finding: name, requirement }) => {
    const finding = findingNamed(findings, name);
    if (requirement.kind === 'is') return decideWord(name, requirement.word, finding);
    const limit = limitOf(name, requirement.value, header, findings);
    return decideQuantity(name, requirement.kind, limit, finding);
  });
  return [...required, ...judgeAgainstBaseline(header, findings)];
}

/**
 * A limit that is a share of what was measured is itself uncertain. How it hangs together with the finding
 * is not known here, so both uncertainties are taken as independent: instruments in common make that the
 * cautious side.
 */
function decideQuantity(
  name: string,
  kind: 'at-least' | 'at-most',
  limit: Limit,
  finding: Finding | undefined,
): Decision {
  const requirement = `${kind === 'at-least' ? 'at least' : 'at most'} ${limitInWords(limit, name)}`;
  if (finding === undefined || typeof finding.value !== 'number')
    return undecided(name, requirement, 'was not measured');
  if (limit.value === undefined) return undecided(name, requirement, limit.missing);
  const shown = decide({
    value: finding.value,
    standardUncertainty: Math.hypot(finding.standardUncertainty ?? 0, limit.standardUncertainty),
    expanded: Math.hypot(expandedOf(finding) ?? 0, limit.expanded),
    requirement: { kind, limit: limit.value },
    ...(limit.standardUncertainty === 0 ? freedomOf(finding) : {}),
  });
  // A least value can show that there is enough, and that there is too much, but neither of their opposites.
  const proven = kind === 'at-least' ? 'conforms' : 'does-not-conform';
  if (finding.bound === 'least' && shown.outcome !== proven)
    return undecided(name, requirement, 'it may be more: it is a least value');
  // A limit that is itself only a least one leaves the opposite open.
  if (limit.bound === 'least' && shown.outcome === proven)
    return undecided(name, requirement, 'what it refers to may be more: that is a least value');
  return {
    finding: name,
    requirement,
    outcome: shown.outcome,
    // A recommendation has no distribution to be within: it is a choice, made from a lower bound.
    probability: finding.standardUncertainty === null ? null : shown.probability,
    note: limit.standardUncertainty === 0 ? '' : 'the limit was measured too, and its uncertainty counts',
  };
}

/** The probability goes by the same distribution as the interval. */
function freedomOf({ budget }: Finding): { readonly degreesOfFreedom?: number } {
  return budget.length === 0 ? {} : { degreesOfFreedom: effectiveDegreesOfFreedom(budget) };
}

function decideWord(name: string, word: string, finding: Finding | undefined): Decision {
  const requirement = `is ${word}`;
  if (finding === undefined) return undecided(name, requirement, 'was not measured');
  if (finding.value === 'undetermined') return undecided(name, requirement, 'could not be told');
  const outcome = finding.value === word ? 'conforms' : 'does-not-conform';
  return { finding: name, requirement, outcome, probability: null, note: `it is ${finding.value}` };
}

function undecided(finding: string, requirement: string, note: string): Decision {
  return { finding, requirement, outcome: 'undecided', probability: null, note };
}
