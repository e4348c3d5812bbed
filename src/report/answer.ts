import { type Finding, findingNamed } from '../analysis/finding.js';
import { compareWithBaseline } from '../judgement/compare.js';
import { capitalised } from '../quantity/capitalised.js';
import { listed } from '../quantity/listed.js';
import { roundedDown } from '../quantity/rounded-down.js';
import { earthWasWorkedOn } from '../record/earth-changes.js';
import { changesInWords } from './changes.js';
import { inOneLine } from './finding-text.js';
import { groupAnswer } from './group-answer.js';
import { earthAnswer, moduleAnswer } from './module-answer.js';
import { printable } from './printable.js';
import { endedHow, isWhole, type Result } from './result.js';

/**
 * What the technician came for, in a few sentences: what does not conform, what to do, and why. Empty when
 * nothing was found.
 */
export function answer(result: Result): readonly string[] {
  const single = result.header.circuit === 'single';
  const [first, ...reasons] = advice(result);
  return [
    ...verdict(result),
    ...unfinished(result),
    ...(first === undefined ? [] : [first]),
    ...(single ? [...reasons, ...moduleAnswer(result.findings)] : groupAnswer(result)),
    ...earthAnswer(result.findings),
    ...whoDecides(result),
    ...sinceBaseline(result),
  ];
}

/** How hard it may be worked, and why. */
function advice(result: Result): readonly string[] {
  const recommended = findingNamed(result.findings, 'recommended-current');
  const usable = findingNamed(result.findings, 'usable-current');
  if (recommended === undefined || usable === undefined) return [];
  const current = Number(recommended.value);
  const it = { single: 'it', parallel: 'the group', series: 'the string' }[result.header.circuit];
  const what =
    current > 0
      ? `${loaded(it, isWhole(result), result.outcome)} with up to ${roundedDown(current, 'current')}`
      : `do not load ${it}`;
  return [`${capitalised(asFarAs(result) + what)}.`, why(usable)];
}

function asFarAs(result: Result): string {
  if (isWhole(result)) return '';
  return endedHow(result).how === 'completed'
    ? 'as far as the record can be believed, '
    : 'as far as the run went, ';
}

/** Who reads one line only must not take what is not accepted, or not tried to its end, for something to be used. */
function loaded(it: string, whole: boolean, outcome: Result['outcome']): string {
  if (outcome === 'does-not-conform') return `by its limits alone ${it} could be loaded continuously`;
  if (whole && outcome === 'undecided')
    return `if it conforms, which is undecided, ${it} may be loaded continuously`;
  return whole ? `load ${it} continuously` : `${it} could be loaded continuously`;
}

const endedAs = { stopped: 'was stopped', failed: 'failed', 'cut-off': 'was cut off' } as const;

/** A run that was broken off shows less than it was to show, and what comes of it is no release. */
function unfinished(result: Result): readonly string[] {
  const { how } = endedHow(result);
  const { header, evidence, findings } = result;
  if (how === 'completed' || findings.length === 0) return [];
  const last = evidence.steps.at(-1);
  const total = header.steps.length;
  if (last === undefined) return [`The run ${endedAs[how]} before its first step.`];
  const where = last.step > evidence.stepsDone ? 'in' : 'after';
  const of = last.step <= total ? ` of ${total}` : '';
  const missing = last.step < total || where === 'in' ? '; what it was still to show is missing' : '';
  return [`The run ${endedAs[how]} ${where} step ${last.step}${of} (${printable(last.kind)})${missing}.`];
}

/** What may be nothing is no delivery: then only the reason is told. */
function why(usable: Finding): string {
  return (usable.interval?.[0] ?? 0) > 0
    ? `It delivers ${usable.bound === 'least' ? 'at least ' : ''}${inOneLine(usable)}; ${usable.note}.`
    : `${capitalised(usable.note)}.`;
}

/** Which finding moved since the baseline, where there is one, and by how much. */
function sinceBaseline({ header, findings }: Result): readonly string[] {
  const comparison = compareWithBaseline(header, findings);
  if (comparison === undefined || header.baseline === undefined) return [];
  const [first = '', ...others] = changesInWords(comparison);
  return [`Compared with ${header.baseline.run}: ${first}`, ...others];
}

/** What was asked for and is not met comes first: nobody should read on and miss it. */
function verdict({ decisions, outcome }: Result): readonly string[] {
  if (outcome !== 'does-not-conform') return [];
  const names = decisions.flatMap((one) => (one.outcome === outcome ? [one.finding] : []));
  return [`It does not conform: ${[...new Set(names)].join(', ')}.`];
}

/** A measurement can't say that a module whose earth was worked on may be used; of several it is said of which. */
function whoDecides({ header: { circuit, modules, procedure }, findings }: Result): readonly string[] {
  if (!procedure.cautions.includes('earth-link-removed') || findings.length === 0) return [];
  const whose = modules.filter(earthWasWorkedOn);
  // A procedure may say so of modules whose files do not.
  const names = (whose.length === 0 ? modules : whose).map(({ name }) => printable(name));
  const [what, they] =
    circuit === 'single'
      ? ['Its earth was worked on', 'it']
      : names.length === 1
        ? [`The earth of ${listed(names)} was worked on`, 'it']
        : [`The earths of ${listed(names)} were worked on`, 'they'];
  return [`${what}: whether ${they} may be used so is for local codes and a licensed person to decide.`];
}
