import { expandedOf, type Finding } from '../analysis/finding.js';
import { formatExact, formatUncertain, type UncertainText } from '../quantity/format-quantity.js';

/** A finding in three columns: value, expanded uncertainty, unit; a word stands alone in the first. */
export function columnsOf(finding: Finding): UncertainText {
  if (finding.dimension === null || typeof finding.value === 'string') {
    return { value: String(finding.value), uncertainty: '', unit: '' };
  }
  const expanded = expandedOf(finding);
  // What was worked out of factors keeps its digits beside them.
  return expanded === null && finding.factors.length === 0
    ? formatExact(finding.value, finding.dimension)
    : formatUncertain(finding.value, expanded ?? undefined, finding.dimension);
}

/** `5.088 ± 0.018 A`; a word alone. */
export function inOneLine(finding: Finding): string {
  const { value, uncertainty, unit } = columnsOf(finding);
  return uncertainty === '' ? `${value} ${unit}`.trimEnd() : `${value} ± ${uncertainty} ${unit}`;
}
