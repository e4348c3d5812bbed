import { type Finding, findingNamed } from '../analysis/finding.js';
import { inOneLine } from './finding-text.js';
import { listed } from '../quantity/listed.js';

/**
 * What one module is for the one who asked: where and how it gives way, how warm it gets, how its output
 * stands to earth. What was not measured is not mentioned.
 */
export function moduleAnswer(findings: readonly Finding[]): readonly string[] {
  return [...limit(findings), ...shortCircuit(findings), ...warming(findings)];
}

/** How outputs stand to earth: a sentence for one module, and for those of several that it is the same of. */
export function earthAnswer(findings: readonly Finding[]): readonly string[] {
  const sentences = new Map<string, string[]>();
  for (const relation of findings.filter(({ name }) => /^earth-relation(-of-|$)/.test(name))) {
    const resistance = findingNamed(findings, relation.name.replace('relation', 'resistance'));
    const note = relation.note === '' ? '' : `: ${relation.note}`;
    const said = `${standing[String(relation.value)] ?? unknown}${measuredAs(resistance)}${note}`;
    const module = relation.name.slice('earth-relation-of-'.length);
    sentences.set(said, [...(sentences.get(said) ?? []), module]);
  }
  return [...sentences].map(([said, modules]) => {
    if (modules.length > 1) return `Each output of ${listed(modules)} ${said}.`;
    return `${modules[0] === '' ? 'Its output' : `The output of ${modules[0] ?? ''}`} ${said}.`;
  });
}

const unknown = 'could not be told';
const standing: Readonly<Record<string, string>> = {
  bonded: 'is tied to earth',
  isolated: 'is isolated from earth',
  leaky: 'leaks to earth',
  undetermined: 'may or may not be tied to earth, which could not be told',
};

function measuredAs(resistance: Finding | undefined): string {
  if (resistance === undefined) return '';
  return ` (${resistance.bound === 'least' ? 'at least ' : ''}${inOneLine(resistance)})`;
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

/** A soak that only watched the voltage shows that it settled, and must not pass for one that felt the case. */
function unmeasuredWarmth(findings: readonly Finding[]): readonly string[] {
  const soaked = findingNamed(findings, 'thermal-drift') !== undefined;
  return soaked ? ['How warm it got was not measured: only its voltage was watched.'] : [];
}

function warming(findings: readonly Finding[]): readonly string[] {
  const rise = findingNamed(findings, 'temperature-rise');
  if (typeof rise?.value !== 'number') return unmeasuredWarmth(findings);
  const least = rise.bound === 'least' ? 'at least ' : '';
  return [`It warms by ${least}${inOneLine(rise)}: ${rise.note}.`];
}
