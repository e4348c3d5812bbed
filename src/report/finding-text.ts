import type { Finding } from '../analysis/finding.js';
import { formatUncertain, type UncertainText } from '../quantity/format-quantity.js';

/** A finding in three columns: value, expanded uncertainty, unit; a word stands alone in the first. */
export function columnsOf(finding: Finding): UncertainText {
  if (finding.dimension === null || typeof finding.value === 'string') {
    return { value: String(finding.value), uncertainty: '', unit: '' };
  }
  const expanded = finding.interval === null ? undefined : (finding.interval[1] - finding.interval[0]) / 2;
  return formatUncertain(finding.value, expanded, finding.dimension);
}

/** `5.088 ± 0.018 A`. */
export function inOneLine(finding: Finding): string {
  const { value, uncertainty, unit } = columnsOf(finding);
  return uncertainty === '' ? `${value} ${unit}` : `${value} ± ${uncertainty} ${unit}`;
}
