import { type Finding, findingNamed } from '../../analysis/finding.js';
import type { Decision } from '../../judgement/judge.js';
import { formatInterval } from '../../quantity/format-quantity.js';
import { inOneLine } from '../finding-text.js';
import { modulesInWords } from '../record-heading.js';
import { journalInWords, probabilityInWords } from '../record-words.js';
import { endedHow, type Result } from '../result.js';
import { takenOver } from '../taken-over.js';
import { loadOn, warningInWords } from '../warnings.js';
import { watchmanText } from '../watchman-text.js';
import type { Came, Case, Suite } from './suite.js';

/**
 * A record as a suite: a case for each decision. One that does not conform is a failure of the type
 * `does-not-conform`, one that is undecided a failure of the type `undecided`: what nobody can tell has not
 * passed. A run that did not come to its end, a load that nobody saw go off, and a journal that can't be believed
 * to its end, is an error each. A record of which nothing is required has one case, which is skipped.
 */
export function runSuite(result: Result): Suite {
  const { run, header, evidence, decisions } = result;
  const group = groupOf(result);
  return {
    name: run,
    began: header.began,
    lasted: evidence.lasted,
    properties: propertiesOf(result),
    cases: [
      ...troubles(result).map((trouble): Case => ({ group, ...trouble })),
      ...decisions.map((decision): Case => {
        const name = `${decision.finding} ${decision.requirement}`;
        return { name, group, came: decided(decision, findingNamed(result.findings, decision.finding)) };
      }),
      ...(decisions.length === 0 ? [nothingToJudge(group)] : []),
    ],
  };
}

/** What was under test, and by which procedure. */
function groupOf({ header }: Result): string {
  return `${modulesInWords(header)}.${header.procedure.name}`;
}

/** What a reader of the file alone must know of the record. */
export function propertiesOf(result: Result): Suite['properties'] {
  const { header, evidence, integrity, outcome, run } = result;
  const { circuit, procedure, bench, program, instruments, baseline } = header;
  const { how } = endedHow(result);
  return [
    ['record', run],
    ['program', `${program.name} ${program.version}`],
    ['module', modulesInWords(header)],
    ['circuit', circuit],
    ['procedure', procedure.name],
    ['bench', bench.name],
    ['simulated', String(bench.simulated)],
    ...instruments.map(({ role, identity, driver, address }): [string, string] => [
      `instrument.${role}`,
      `${identity}, ${driver}, ${address}`,
    ]),
    ...(baseline === undefined ? [] : [['baseline', baseline.run] as const]),
    ...takenOver(evidence).map((part): [string, string] => [
      'resumed',
      `steps ${part.first} to ${part.last} of ${part.run}`,
    ]),
    ['ended', how],
    ['outcome', outcome],
    ['integrity', integrity.kind],
    ['journal', journalInWords(integrity)],
    ['readings', String(evidence.readings)],
  ];
}

type Trouble = Pick<Case, 'name' | 'came'>;

/** Why the record can't be taken for all that was to be shown, and what must be seen to. */
export function troubles(result: Result): readonly Trouble[] {
  const { integrity } = result;
  const on = loadOn(result);
  return [
    ...endingOf(result),
    ...(on === undefined ? [] : [trouble('the load', 'not-confirmed-off', warningInWords(on))]),
    ...(integrity.kind === 'damaged' ? [trouble('the journal', 'damaged', damage(integrity))] : []),
  ];
}

function trouble(name: string, type: string, message: string): Trouble {
  return { name, came: { kind: 'error', type, message } };
}

function endingOf(result: Result): readonly Trouble[] {
  const { how, reason } = endedHow(result);
  const why = reason ?? 'no reason is given';
  switch (how) {
    case 'completed':
      return [];
    case 'stopped':
    case 'failed':
      return [trouble('the run', how, `the run ${how === 'stopped' ? 'was stopped' : 'failed'}: ${why}`)];
    case 'cut-off': {
      const { watchman } = result;
      const dead = watchman === undefined ? '' : `: ${watchmanText(watchman)}`;
      return [trouble('the run', how, `the record is cut off, and the run has no end${dead}`)];
    }
  }
}

function damage({ line, problem }: Result['integrity'] & { readonly kind: 'damaged' }): string {
  return `line ${line} of the journal: ${problem}`;
}

function nothingToJudge(group: string): Case {
  const text =
    'Nothing is required of this record, so there is nothing to judge: it has neither passed nor failed.';
  return { name: 'nothing is required', group, came: { kind: 'skipped', text } };
}

function decided(decision: Decision, finding: Finding | undefined): Came {
  const { outcome } = decision;
  const text = reasons(decision, finding);
  return outcome === 'conforms'
    ? { kind: 'passed', text }
    : { kind: 'failure', type: outcome, message: text };
}

/** `5.088 ± 0.018 A (95 %: 5.070 A to 5.106 A); required: at least 6 A; conformance probability below 0.1 %`. */
function reasons({ requirement, probability, note }: Decision, finding: Finding | undefined): string {
  return [
    ...(finding === undefined ? [] : [valueOf(finding)]),
    `required: ${requirement}`,
    ...(probability === null ? [] : [`conformance probability ${probabilityInWords(probability)}`]),
    ...(note === '' ? [] : [note]),
  ].join('; ');
}

function valueOf(finding: Finding): string {
  const { value, dimension, interval, bound } = finding;
  const least = bound === 'least' ? 'at least ' : '';
  if (typeof value === 'string' || dimension === null || interval?.every(Number.isFinite) !== true)
    return `${least}${inOneLine(finding).trim()}`;
  const { low, high, unit } = formatInterval(value, interval[0], interval[1], dimension);
  return `${least}${inOneLine(finding)} (95 %: ${low} ${unit} to ${high} ${unit})`;
}
