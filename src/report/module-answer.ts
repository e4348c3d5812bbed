import { type Finding, findingNamed } from '../analysis/finding.js';
import { inOneLine } from './finding-text.js';

/**
 * What one module is for the one who asked: where and how it gives way, how warm it gets, how its output
 * stands to earth. What was not measured is not mentioned.
 */
export function moduleAnswer(findings: readonly Finding[]): readonly string[] {
  return [...limit(findings), ...shortCircuit(findings), ...warming(findings)];
}

/** Of each module whose output was looked at, one or several. */
export function earthAnswer(findings: readonly Finding[]): readonly string[] {
  return findings
    .filter(({ name }) => /^earth-relation(-of-|$)/.test(name))
    .map((relation) => {
      const module = relation.name.slice('earth-relation-of-'.length);
      const resistance = findingNamed(findings, relation.name.replace('relation', 'resistance'));
      const whose = module === '' ? 'Its output' : `The output of ${module}`;
      return `${whose} ${standing[String(relation.value)] ?? 'could not be told'}${measuredAs(resistance)}${relation.note === '' ? '' : `; ${relation.note}`}.`;
    });
}

const standing: Readonly<Record<string, string>> = {
  bonded: 'is tied to earth',
  isolated: 'is isolated from earth',
  leaky: 'leaks to earth',
  undetermined: 'may or may not be tied to earth, which could not be told',
};

function measuredAs(resistance: Finding | undefined): string {
  if (resistance === undefined) return '';
  return resistance.bound === 'least'
    ? ` (at least ${inOneLine(resistance)})`
    : ` (${inOneLine(resistance)})`;
}

/** Where it leaves regulation, where it drops out, and what it does there. */
function limit(findings: readonly Finding[]): readonly string[] {
  const onset = findingNamed(findings, 'limit-onset-current');
  const dropout = findingNamed(findings, 'dropout-current');
  if (dropout === undefined) return [];
  const end = `drops out at ${inOneLine(dropout)}${styleInBrackets(findings)}`;
  return onset === undefined
    ? [`It regulates until it ${end}.`]
    : [`It leaves regulation at ${inOneLine(onset)} and ${end}.`];
}

function styleInBrackets(findings: readonly Finding[]): string {
  const style = findingNamed(findings, 'limit-style');
  return style === undefined || style.value === 'undetermined' ? '' : ` (${String(style.value)})`;
}

function shortCircuit(findings: readonly Finding[]): readonly string[] {
  const current = findingNamed(findings, 'short-circuit-current');
  if (typeof current?.value !== 'number') return [];
  const style = findingNamed(findings, 'dropout-current') === undefined ? styleInBrackets(findings) : '';
  return [`Into a short circuit it gives ${inOneLine(current)}${style}.`];
}

function warming(findings: readonly Finding[]): readonly string[] {
  const rise = findingNamed(findings, 'temperature-rise');
  if (typeof rise?.value !== 'number') return [];
  const least = rise.bound === 'least' ? 'at least ' : '';
  return [`It warms by ${least}${inOneLine(rise)}: ${rise.note}.`];
}
