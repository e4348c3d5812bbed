import { expandedOf } from '../../analysis/finding.js';
import { allowedInWords, changeInWords, valueInWords } from '../../judgement/change-in-words.js';
import type { Compared } from '../../judgement/compare.js';
import type { Comparable } from '../../judgement/difference.js';
import { movementOf } from '../../judgement/movement.js';
import { formatUncertain } from '../../quantity/format-quantity.js';
import type { Expected } from '../../record/baseline.js';
import { verdictWords } from '../comparison.js';

/** `from 5.281 A to 4.581 A, by -0.700 ± 0.019 A (-13 %)`; what only one record has is said so. */
export function movedInWords(compared: Compared): string {
  const { before, after, difference } = compared;
  if (before === undefined || after === undefined) return onlyInWords(compared);
  const fromTo = `from ${valueInWords(before)} to ${valueInWords(after)}`;
  const change = difference === undefined ? '' : changeInWords(compared);
  return change === '' ? fromTo : `${fromTo}, by ${change}`;
}

function onlyInWords({ before, after }: Compared): string {
  if (after !== undefined) return `${valueInWords(after)} in the later record only`;
  return before === undefined ? '' : `${valueInWords(before)} in the earlier record only`;
}

/** `allowed is 5 %`, `it must be the same`, `it must become isolated`. */
export function demandInWords(expected: Expected, compared: Compared): string {
  switch (expected.kind) {
    case 'within':
      return `allowed is ${allowedInWords(expected, compared)}`;
    case 'same':
      return 'it must be the same';
    case 'becomes':
      return `it must become ${expected.word}`;
  }
}

/** What the tolerance says of it: `allowed is 5 %, and it moved further`, `it must be the same: unchanged`. */
export function allowanceInWords(compared: Compared): string {
  const { expected, verdict } = compared;
  if (expected === undefined) return 'nothing is asked of it';
  const demand = demandInWords(expected, compared);
  if (expected.kind !== 'within') return `${demand}: ${verdictWords[verdict]}`;
  if (verdict === 'changed') return `${demand}, and it moved further`;
  return verdict === 'unchanged-within-tolerance'
    ? `${demand}, and it is within that`
    : `${demand}; whether it is within that can not be told`;
}

/** `5.281 ± 0.018 A`, `at least 4 A`, `hiccup`. */
export function valuePlusMinus(finding: Comparable): string {
  const { value, dimension, bound } = finding;
  const expanded = expandedOf(finding);
  if (typeof value !== 'number' || dimension === null || expanded === null || bound !== undefined)
    return valueInWords(finding);
  const text = formatUncertain(value, expanded, dimension);
  return `${text.value} ± ${text.uncertainty} ${text.unit}`;
}

export function hasMoved(compared: Compared): boolean {
  return movementOf(compared) === 'moved';
}
