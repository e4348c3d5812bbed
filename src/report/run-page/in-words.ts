import type { Finding } from '../../analysis/finding.js';
import { inOneLine } from '../finding-text.js';

/** `5.088 ± 0.018 A`, `≥ 3.990 ± 0.014 A`, `hiccup`. */
export function foundPlusMinus(finding: Finding): string {
  return `${finding.bound === 'least' ? '≥ ' : ''}${inOneLine(finding)}`;
}

/** `1 point`, `2 043 readings`; thousands stand apart. */
export function counted(count: number, what: string): string {
  const apart = String(count).replace(/\B(?=(\d{3})+$)/g, '\u2009');
  return `${apart} ${what}${count === 1 ? '' : 's'}`;
}
