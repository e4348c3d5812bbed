import { expandedOf } from '../analysis/finding.js';
import {
  formatExact,
  formatQuantity,
  formatUncertain,
  type UncertainText,
} from '../quantity/format-quantity.js';
import type { Dimension } from '../quantity/quantity.js';
import type { Expected } from '../record/baseline.js';
import type { Compared } from './compare.js';
import type { Comparable, Difference } from './difference.js';

/** `+18.2 ± 0.3 mΩ (+101 %)`; a difference of what is in % is in percentage points. */
export function differenceInWords({ value, dimension, expanded, share }: Difference): string {
  const text = uncertainText(value, expanded, dimension);
  const unit = dimension === 'ratio' ? 'percentage points' : text.unit;
  const number = value > 0 && Number(text.value) !== 0 ? `+${text.value}` : text.value;
  const plusMinus = text.uncertainty === '' ? '' : ` ± ${text.uncertainty}`;
  return `${number}${plusMinus} ${unit}${share === null ? '' : ` (${shareInWords(share)})`}`;
}

function shareInWords(share: number): string {
  const percent = (share * 100).toFixed(Math.abs(share) < 0.1 ? 2 : 0);
  if (Number(percent) === 0) return '0 %';
  return `${share > 0 ? '+' : ''}${percent} %`;
}

/** `20 %`, `50 mV`, `2 percentage points`: how far a finding may be from what it was. */
export function allowedInWords(expected: Expected, { before, after }: Compared): string {
  switch (expected.kind) {
    case 'same':
      return 'the same';
    case 'becomes':
      return `becomes ${expected.word}`;
    case 'within': {
      const { limit } = expected;
      if (limit.kind === 'share') return formatQuantity(limit.ratio, 'ratio');
      const dimension = before?.dimension ?? after?.dimension ?? 'ratio';
      if (dimension === 'ratio') return `${Number((limit.value * 100).toPrecision(12))} percentage points`;
      return formatQuantity(limit.value, dimension === 'temperature' ? 'temperature-difference' : dimension);
    }
  }
}

/** What is asked of a finding, as a decision says it: `unchanged within 20 % of the baseline (18.1 mΩ)`. */
export function requirementInWords(expected: Expected, compared: Compared): string {
  const { before } = compared;
  const was = before === undefined ? '' : valueInWords(before);
  switch (expected.kind) {
    case 'same':
      return `as in the baseline${was === '' ? '' : ` (${was})`}`;
    case 'becomes':
      return `becomes ${expected.word}${was === '' ? '' : ` (${was} in the baseline)`}`;
    case 'within':
      return `unchanged within ${allowedInWords(expected, compared)} of the baseline${was === '' ? '' : ` (${was})`}`;
  }
}

function uncertainText(value: number, expanded: number | null, dimension: Dimension): UncertainText {
  return expanded === null ? formatExact(value, dimension) : formatUncertain(value, expanded, dimension);
}

/** The value alone, to the digits that it deserves: `18.14 mΩ`, `at least 4 A`, `hiccup`. */
export function valueInWords(finding: Comparable): string {
  const { value, dimension, bound } = finding;
  if (typeof value === 'string' || dimension === null) return String(value);
  const text = uncertainText(value, expandedOf(finding), dimension);
  return `${bound === undefined ? '' : 'at least '}${text.value} ${text.unit}`;
}

/**
 * `+18.2 ± 0.3 mΩ (+101 %)` for quantities, `from bonded to isolated` for words; empty for what is alone. Of
 * a least value only that can be told what it has certainly moved by: `-0.99 A or further`.
 */
export function changeInWords({ before, after, difference }: Compared): string {
  if (difference !== undefined && before?.bound === undefined && after?.bound === undefined)
    return differenceInWords(difference);
  if (difference !== undefined) {
    const isCertain =
      before?.bound === undefined ? difference.value > 0 : after?.bound === undefined && difference.value < 0;
    return isCertain ? `${differenceInWords({ ...difference, expanded: null, share: null })} or further` : '';
  }
  if (before === undefined || after === undefined) return '';
  const [was, is] = [valueInWords(before), valueInWords(after)];
  return was === is ? '' : `from ${was} to ${is}`;
}
