import { modulesListed } from './record-heading.js';
import { endedHow, type Result } from './result.js';
import { watchmanText } from './watchman-text.js';

/** What must be known before anything of a record is believed: one word for all to see, and what it is. */
export interface Warning {
  readonly word: string;
  readonly text: string;
}

/** The worst first: that the record is damaged, that the load may be on, whose modules these are, how it ended. */
export function warningsOf(result: Result): readonly Warning[] {
  return [...notWhole(result), ...stillOn(result), ...otherModules(result), ...endedBadly(result)];
}

function notWhole(result: Result): readonly Warning[] {
  const { integrity } = result;
  if (integrity.kind === 'damaged') {
    const { line, problem, lines } = integrity;
    const text = `line ${line} of the journal: ${problem}. What follows rests on the first ${lines} lines.`;
    return [{ word: 'DAMAGED RECORD', text }];
  }
  return isCutOff(result)
    ? [{ word: 'CUT OFF', text: 'the record ends without an end; what follows is what is whole.' }]
    : [];
}

const switchOff = '`railproof safe --bench <file>` switches it off.';

function stillOn(result: Result): readonly Warning[] {
  const { watchman } = result;
  const on = loadOn(result);
  return [
    ...(isCutOff(result) && watchman !== undefined
      ? [{ word: 'WATCHMAN', text: `${watchmanText(watchman)}.` }]
      : []),
    ...(on === undefined ? [] : [on]),
  ];
}

/** That the load may be on, where neither the run nor the watchman saw it go off. */
export function loadOn(result: Result): Warning | undefined {
  const { evidence, watchman } = result;
  const left = { word: 'THE LOAD MAY BE ON', text: switchOff };
  if (isCutOff(result) && watchman !== undefined) return watchman.outcome === 'off' ? undefined : left;
  if (evidence.input !== 'on') return undefined;
  return isCutOff(result)
    ? { word: 'THE LOAD WAS ON', text: `when the record broke off: ${switchOff}` }
    : { word: 'THE LOAD MAY BE ON', text: `nobody could read back that it went off. ${switchOff}` };
}

function isCutOff(result: Result): boolean {
  return endedHow(result).how === 'cut-off';
}

function otherModules({ header }: Result): readonly Warning[] {
  const { baseline } = header;
  const names = modulesListed(header);
  if (baseline === undefined || baseline.modules.join(', ') === names) return [];
  const text = `the baseline is of ${baseline.modules.join(', ')}, this record of ${names}.`;
  return [{ word: 'DIFFERENT MODULES', text }];
}

function endedBadly(result: Result): readonly Warning[] {
  const { how, reason } = endedHow(result);
  if (how === 'stopped') return [{ word: 'STOPPED', text: (reason ?? '').replace(/^stopped /, '') }];
  return how === 'failed' ? [{ word: 'FAILED', text: reason ?? '' }] : [];
}

/** `THE LOAD WAS ON when the record broke off: …`, `CUT OFF: the record ends …`. */
export function warningInWords({ word, text }: Warning): string {
  return text.startsWith('when ') ? `${word} ${text}` : `${word}: ${text}`;
}
