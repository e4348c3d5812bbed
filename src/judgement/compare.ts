import type { Expected, ToleranceEntry } from '../record/baseline.js';
import type { RunHeader } from '../record/run-header.js';
import type { Finding } from '../analysis/finding.js';
import { type Outcome, overall } from './decision.js';
import { bothMeasured, type Comparable, type Difference, differenceOf } from './difference.js';
import { type Judged, judgeBoth, judgeOne } from './verdict.js';

/** What one record shows, and of what. */
export interface Side {
  /** The names of its modules, in the order of the circuit. */
  readonly modules: readonly string[];
  readonly findings: readonly Comparable[];
}

/** A finding of either record, side by side. */
export interface Compared extends Judged {
  readonly finding: string;
  readonly before: Comparable | undefined;
  readonly after: Comparable | undefined;
  /** Where both are quantities of one kind. */
  readonly difference: Difference | undefined;
  /** What was asked for; undefined where it may be anything. */
  readonly expected: Expected | undefined;
  /** How far it may be from what it was, in the unit of the difference; where that was asked for. */
  readonly tolerance: number | undefined;
}

export interface Comparison {
  readonly sameModules: boolean;
  /** Of the later record in its order, then those that only the earlier one has. */
  readonly findings: readonly Compared[];
  /** What was asked of findings that neither record has. */
  readonly inNeither: readonly ToleranceEntry[];
  /** Whether all is as it should be; undecided too where nothing that was asked for is in the records. */
  readonly outcome: Outcome;
}

/** Two records' findings side by side, and what changed by the tolerance asked for. */
export function compare(before: Side, after: Side, tolerance: readonly ToleranceEntry[]): Comparison {
  const earlier = new Map(before.findings.map((finding) => [finding.name, finding]));
  const later = new Map(after.findings.map((finding) => [finding.name, finding]));
  const names = [...new Set([...later.keys(), ...earlier.keys()])];
  const findings = names.map((name) => {
    const expected = entryFor(name, tolerance)?.expected;
    const [then, now] = [earlier.get(name), later.get(name)];
    return { finding: name, expected, ...sideBySide(then, now, expected) };
  });
  const inNeither = tolerance.filter((entry) => !names.some((name) => entryFor(name, tolerance) === entry));
  return {
    sameModules: before.modules.join('\n') === after.modules.join('\n'),
    findings,
    inNeither,
    outcome: outcomeOf(findings, inNeither),
  };
}

/** The findings of a record beside those of its baseline; undefined where it was given none. */
export function compareWithBaseline(
  { baseline, modules }: RunHeader,
  findings: readonly Finding[],
): Comparison | undefined {
  if (baseline === undefined) return undefined;
  const after = { modules: modules.map(({ name }) => name), findings };
  return compare(baseline, after, baseline.tolerance.findings);
}

function sideBySide(
  before: Comparable | undefined,
  after: Comparable | undefined,
  expected: Expected | undefined,
): Omit<Compared, 'finding' | 'expected'> {
  const alone = { before, after, difference: undefined, tolerance: undefined };
  if (before === undefined) return { ...alone, ...judgeOne('only-after', after, expected) };
  if (after === undefined) return { ...alone, ...judgeOne('only-before', before, expected) };
  const measured = bothMeasured(before, after);
  const difference = measured === undefined ? undefined : differenceOf(...measured);
  const tolerance = measured === undefined ? undefined : toleranceOf(expected, measured[0].value);
  const judged = judgeBoth(before, after, { expected, difference, tolerance });
  return { before, after, difference, tolerance, ...judged };
}

/** A share is one of the earlier value as it was found: what may be is agreed on before the later run. */
function toleranceOf(expected: Expected | undefined, earlier: number): number | undefined {
  if (expected?.kind !== 'within') return undefined;
  const { limit } = expected;
  return limit.kind === 'share' ? limit.ratio * Math.abs(earlier) : limit.value;
}

/** What is asked of a finding by its own name counts before what is asked of its family. */
function entryFor(name: string, tolerance: readonly ToleranceEntry[]): ToleranceEntry | undefined {
  return (
    tolerance.find(({ finding }) => finding === name) ??
    tolerance.find(({ finding }) => finding.endsWith('*') && name.startsWith(finding.slice(0, -1)))
  );
}

/**
 * Something must have become what it is to become, so it is missed where neither record has it. What must
 * not change concerns only what was found.
 */
function outcomeOf(findings: readonly Compared[], inNeither: readonly ToleranceEntry[]): Outcome {
  const judged = findings.flatMap(({ outcome }) => (outcome === 'not-judged' ? [] : [{ outcome }]));
  const missed = changesMissed(inNeither).map(() => ({ outcome: 'undecided' as const }));
  const outcome = overall([...judged, ...missed]);
  return outcome === 'not-judged' ? 'undecided' : outcome;
}

/** The changes that were asked for, among what neither record has. */
export function changesMissed(
  inNeither: readonly ToleranceEntry[],
): readonly { readonly finding: string; readonly word: string }[] {
  return inNeither.flatMap(({ finding, expected }) =>
    expected.kind === 'becomes' ? [{ finding, word: expected.word }] : [],
  );
}
