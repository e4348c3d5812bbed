import { type Finding, findingNamed } from '../analysis/finding.js';
import { inOneLine } from './finding-text.js';
import type { Result } from './result.js';

/**
 * What a group or a stack is for the one who asked: what it holds and how it fails, who hogs and why, which
 * ballast would do; of a stack its voltage, where its uppermost 0 V stands and who gives way first. Empty
 * for one module.
 */
export function groupAnswer({ header, findings }: Result): readonly string[] {
  switch (header.circuit) {
    case 'single':
      return [];
    case 'parallel':
      return [
        ...held(findings, 'The group'),
        ...ballasts(findings),
        ...hoggingInWords(findings),
        ...wanted(findings),
      ];
    case 'series':
      return [...held(findings, 'The string'), ...standing(header, findings), ...weakestInWords(findings)];
  }
}

function held(findings: readonly Finding[], what: string): readonly string[] {
  const current = findingNamed(findings, 'group-current');
  if (current === undefined) return [];
  const atLeast = current.bound === 'least' ? 'at least ' : '';
  return [sentence(`${what} holds ${atLeast}${inOneLine(current)}`, current.note, '; ')];
}

/** What is wrong with the bench file comes before whatever would have rested on it. */
function ballasts(findings: readonly Finding[]): readonly string[] {
  const prefix = 'ballast-of-';
  return findings
    .filter(({ name }) => name.startsWith(prefix))
    .map((finding) =>
      sentence(
        `The ballast of ${finding.name.slice(prefix.length)} is ${inOneLine(finding)}`,
        finding.note,
        '; ',
      ),
    );
}

/** Whether one of them takes more than its part, and why. */
export function hoggingInWords(findings: readonly Finding[]): readonly string[] {
  const finding = findingNamed(findings, 'hogging-module');
  if (finding === undefined) return [];
  switch (finding.value) {
    case 'none':
      return [sentence('They share the load', finding.note)];
    case 'undetermined':
      return [sentence('Whether one of them hogs could not be told', finding.note)];
    default:
      return [sentence(`${String(finding.value)} hogs`, finding.note)];
  }
}

function wanted(findings: readonly Finding[]): readonly string[] {
  const finding = findingNamed(findings, 'recommended-ballast');
  if (finding === undefined) return [];
  if (finding.value === 'none') return [sentence('No ballast would do', finding.note)];
  if (finding.value === 'undetermined')
    return [sentence('Which ballast would do could not be told', finding.note)];
  return [
    Number(finding.value) === 0
      ? sentence('No ballast is needed', finding.note)
      : `As ballast take ${finding.note}.`,
  ];
}

function standing({ modules }: Result['header'], findings: readonly Finding[]): readonly string[] {
  const stack = findingNamed(findings, 'stack-voltage');
  const top = modules.at(-1)?.name ?? '';
  const float = findingNamed(findings, `float-voltage-of-${top}`);
  return [
    ...(stack === undefined ? [] : [sentence(`It gives ${inOneLine(stack)} with no load`, stack.note, '; ')]),
    ...(float === undefined
      ? []
      : [
          sentence(`The 0 V of ${top} floats ${inOneLine(float)} above that of the string`, float.note, '; '),
          ...unknownIsolation(modules),
        ]),
  ];
}

/** Of all that float; the lowest does not. */
function unknownIsolation(modules: Result['header']['modules']): readonly string[] {
  const names = modules
    .slice(1)
    .flatMap(({ name, outputIsolation }) => (outputIsolation === 'unknown' ? [name] : []));
  if (names.length === 0) return [];
  const outputs = names.length === 1 ? 'the output' : 'the outputs';
  return [
    `What ${outputs} of ${names.join(' and ')} can withstand to earth is unknown: find that out before ${names.length === 1 ? 'it floats' : 'they float'} in use.`,
  ];
}

/** Which of a string gives way first. */
export function weakestInWords(findings: readonly Finding[]): readonly string[] {
  const finding = findingNamed(findings, 'weakest-module');
  if (finding === undefined) return [];
  if (finding.value === 'none') return [sentence('None of them gives way first', finding.note)];
  if (finding.value === 'undetermined')
    return [sentence('Which gives way first could not be told', finding.note)];
  return [sentence(`The weakest is ${String(finding.value)}`, finding.note)];
}

function sentence(said: string, note: string, between = ': '): string {
  return note === '' ? `${said}.` : `${said}${between}${note}.`;
}
