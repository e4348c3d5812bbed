import { expandedOf } from '../analysis/finding.js';
import { formatQuantity, formatUncertain } from '../quantity/format-quantity.js';
import type { Expected } from '../record/baseline.js';
import type { Compared } from './compare.js';
import type { Comparable, Difference } from './difference.js';

/** `+18.2 ± 0.3 mΩ (+101 %)`; a difference of what is in % is in percentage points. */
export function differenceInWords({ value, dimension, expanded, share }: Difference): string {
  const text = formatUncertain(value, expanded ?? undefined, dimension);
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

/** The value alone, to the digits that it deserves: `18.14 mΩ`, `at least 4 A`, `hiccup`. */
export function valueInWords(finding: Comparable): string {
  const { value, dimension, bound } = finding;
  if (typeof value === 'string' || dimension === null) return String(value);
  const text = formatUncertain(value, expandedOf(finding) ?? undefined, dimension);
  return `${bound === undefined ? '' : 'at least '}${text.value} ${text.unit}`;
}

/** `+18.2 ± 0.3 mΩ (+101 %)` for quantities, `from bonded to isolated` for words; empty for what is alone. */
export function changeInWords({ before, after, difference }: Compared): string {
  if (difference !== undefined) return differenceInWords(difference);
  if (before === undefined || after === undefined) return '';
  const [was, is] = [valueInWords(before), valueInWords(after)];
  return was === is ? '' : `from ${was} to ${is}`;
}
