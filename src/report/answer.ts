import { type Finding, findingNamed } from '../analysis/finding.js';
import { compareWithBaseline } from '../judgement/compare.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes } from '../quantity/quantity.js';
import { changesInWords } from './changes.js';
import { inOneLine } from './finding-text.js';
import { groupAnswer } from './group-answer.js';
import { endedHow, type Result } from './result.js';

/** What the technician came for, in a few sentences, the first of which is what to do. Empty when nothing was found. */
export function answer(result: Result): readonly string[] {
  const single = result.header.circuit === 'single';
  const [first, ...reasons] = advice(result);
  return [
    ...(first === undefined ? [] : [first]),
    ...(single ? reasons : groupAnswer(result)),
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
    current > 0 ? `load ${it} continuously with up to ${roundedDown(current)}` : `do not load ${it}`;
  const sentence = endedHow(result).how === 'completed' ? what : `as far as the run went, ${what}`;
  return [
    `${sentence.charAt(0).toUpperCase()}${sentence.slice(1)}.`,
    `It delivers ${inOneLine(usable)}; ${usable.note}.`,
    ...limit(result.findings),
  ];
}

/** Which finding moved since the baseline, where there is one, and by how much. */
function sinceBaseline({ header, findings }: Result): readonly string[] {
  const comparison = compareWithBaseline(header, findings);
  if (comparison === undefined || header.baseline === undefined) return [];
  const [first = '', ...others] = changesInWords(comparison);
  return [`Compared with ${header.baseline.run}: ${first}`, ...others];
}

/** Where it leaves regulation, where it drops out, and what it does there. */
function limit(findings: readonly Finding[]): readonly string[] {
  const onset = findingNamed(findings, 'limit-onset-current');
  const dropout = findingNamed(findings, 'dropout-current');
  const style = findingNamed(findings, 'limit-style');
  if (dropout === undefined) return [];
  const end = `drops out at ${inOneLine(dropout)}`;
  const way = style === undefined || style.value === 'undetermined' ? '' : ` (${String(style.value)})`;
  return onset === undefined
    ? [`It regulates until it ${end}${way}.`]
    : [`It leaves regulation at ${inOneLine(onset)} and ${end}${way}.`];
}

/** To three digits, and never up: a recommendation must not grow by being written. */
function roundedDown(current: Amperes): string {
  const step = 10 ** (Math.floor(Math.log10(current)) - 2);
  // A whole number of steps is not made one less by what dividing loses.
  const down = Math.floor(current / step + 1e-9) * step;
  return formatQuantity(down, 'current', { significant: 3 });
}
