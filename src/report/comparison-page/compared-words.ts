import { expandedOf } from '../../analysis/finding.js';
import { allowedInWords, valueInWords } from '../../judgement/change-in-words.js';
import type { Compared } from '../../judgement/compare.js';
import type { Comparable } from '../../judgement/difference.js';
import { movementOf } from '../../judgement/movement.js';
import { formatUncertain } from '../../quantity/format-quantity.js';
import type { Expected } from '../../record/baseline.js';
import { verdictWords } from '../comparison.js';

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

/** What the tolerance says of it: `allowed is 5 %, and it is not within that`, `it must be the same: unchanged`. */
export function allowanceInWords(compared: Compared): string {
  const { expected, verdict } = compared;
  if (expected === undefined) return 'nothing is asked of it';
  const demand = demandInWords(expected, compared);
  if (expected.kind !== 'within') return `${demand}: ${verdictWords[verdict]}`;
  if (verdict === 'changed') return `${demand}, and it is not within that`;
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
