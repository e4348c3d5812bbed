import { type Finding, findingNamed } from '../analysis/finding.js';
import type { RunHeader } from '../record/run-header.js';
import { effectiveDegreesOfFreedom } from '../statistics/effective-freedom.js';
import { decide } from '../statistics/guarded-decision.js';
import { type Limit, limitOf, limitInWords } from './limit.js';

/** Whether a requirement on a finding is met, the uncertainty being on the safe side (JCGM 106, ILAC-G8). */
export interface Decision {
  readonly finding: string;
  /** As a person reads it: `at least 4 A (100 % of rated-current)`. */
  readonly requirement: string;
  readonly outcome: Outcome;
  /** That the true value meets the requirement; null where there is nothing to compute it from. */
  readonly probability: number | null;
  readonly note: string;
}

export type Outcome = 'conforms' | 'does-not-conform' | 'undecided';

/**
 * Decides each criterion of the record's procedure, with a guard band as wide as the expanded
 * uncertainty. A finding that was not made leaves its criterion undecided.
 */
export function judge(header: RunHeader, findings: readonly Finding[]): readonly Decision[] {
  return header.criteria.map(({ finding: name, requirement }) => {
    const finding = findingNamed(findings, name);
    return requirement.kind === 'is'
      ? decideWord(name, requirement.word, finding)
      : decideQuantity(name, requirement.kind, limitOf(requirement.value, header, findings), finding);
  });
}

/** The worst of the decisions; a record without criteria is not judged. */
export function overall(decisions: readonly Decision[]): Outcome | 'not-judged' {
  if (decisions.length === 0) return 'not-judged';
  if (decisions.some((decision) => decision.outcome === 'does-not-conform')) return 'does-not-conform';
  return decisions.some((decision) => decision.outcome === 'undecided') ? 'undecided' : 'conforms';
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
  if (limit.value === undefined) return undecided(name, requirement, 'what it refers to was not measured');
  const shown = decide({
    value: finding.value,
    standardUncertainty: Math.hypot(finding.standardUncertainty ?? 0, limit.standardUncertainty),
    expanded: Math.hypot(halfWidth(finding), limit.expanded),
    requirement: { kind, limit: limit.value },
    ...(limit.standardUncertainty === 0 ? freedomOf(finding) : {}),
  });
  // A least value can show that there is enough, and that there is too much, but neither of their opposites.
  const proven = kind === 'at-least' ? 'conforms' : 'does-not-conform';
  if (finding.bound === 'least' && shown.outcome !== proven)
    return undecided(name, requirement, 'it may be more: no limit was met');
  return {
    finding: name,
    requirement,
    outcome: shown.outcome,
    // A recommendation has no distribution to be within: it is a choice, made from a lower bound.
    probability: finding.standardUncertainty === null ? null : shown.probability,
    note: limit.standardUncertainty === 0 ? '' : 'the limit was measured too, and its uncertainty counts',
  };
}

function halfWidth({ interval }: Finding): number {
  return interval === null ? 0 : (interval[1] - interval[0]) / 2;
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
