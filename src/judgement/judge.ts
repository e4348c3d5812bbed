import { type Finding } from '../analysis/finding.js';
import { formatQuantity, formatShare } from '../quantity/format-quantity.js';
import type { Dimension, QuantityOrShare, ReferenceName } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { decide } from '../statistics/guarded-decision.js';

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

type Criterion = RunHeader['criteria'][number];

/**
 * Decides each criterion of the record's procedure, with a guard band as wide as the expanded
 * uncertainty. A finding that was not made leaves its criterion undecided.
 */
export function judge(header: RunHeader, findings: readonly Finding[]): readonly Decision[] {
  return header.criteria.map((criterion) => decideOne(criterion, header, findings));
}

/** The worst of the decisions; a record without criteria is not judged. */
export function overall(decisions: readonly Decision[]): Outcome | 'not-judged' {
  if (decisions.length === 0) return 'not-judged';
  if (decisions.some((decision) => decision.outcome === 'does-not-conform')) return 'does-not-conform';
  return decisions.some((decision) => decision.outcome === 'undecided') ? 'undecided' : 'conforms';
}

function decideOne(criterion: Criterion, header: RunHeader, findings: readonly Finding[]): Decision {
  const { finding: name, requirement } = criterion;
  const finding = findings.find((one) => one.name === name);
  if (requirement.kind === 'is') return decideWord(name, requirement.word, finding);
  const limit = limitOf(requirement.value as QuantityOrShare, header, findings);
  const words = `${requirement.kind === 'at-least' ? 'at least' : 'at most'} ${inWords(requirement.value as QuantityOrShare, limit, finding)}`;
  if (finding === undefined || typeof finding.value !== 'number')
    return undecided(name, words, 'was not measured');
  if (limit === undefined) return undecided(name, words, 'what it refers to was not measured');
  const expanded = finding.interval === null ? 0 : (finding.interval[1] - finding.interval[0]) / 2;
  const decision = decide({
    value: finding.value,
    standardUncertainty: finding.standardUncertainty ?? 0,
    expanded,
    requirement: { kind: requirement.kind, limit },
  });
  return { finding: name, requirement: words, ...decision, note: '' };
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

/** Shares refer to the nameplate, or to another finding of the same record. */
function limitOf(
  value: QuantityOrShare,
  header: RunHeader,
  findings: readonly Finding[],
): number | undefined {
  if (value.kind === 'absolute') return value.value;
  const rated = header.modules[0]?.rated;
  const nameplate: Partial<Record<ReferenceName, number | undefined>> = {
    'rated-voltage': rated?.voltage,
    'rated-current': rated?.current,
  };
  const whole = nameplate[value.of] ?? findings.find((finding) => finding.name === value.of)?.value;
  return typeof whole === 'number' ? whole * value.ratio : undefined;
}

function inWords(value: QuantityOrShare, limit: number | undefined, finding: Finding | undefined): string {
  const dimension: Dimension = finding?.dimension ?? 'ratio';
  if (value.kind === 'absolute') return formatQuantity(value.value, dimension);
  const share = formatShare(value, dimension);
  return limit === undefined ? share : `${formatQuantity(limit, dimension)} (${share})`;
}
