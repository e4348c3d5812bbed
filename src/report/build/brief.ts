import { formatExact } from '../../quantity/format-quantity.js';
import type { Dimension } from '../../quantity/quantity.js';

/** A number worked out, for sentences and tables that say nothing of its uncertainty: three digits, none idle. */
export function brief(value: number, dimension: Dimension): string {
  const { value: digits, unit } = formatExact(Number(value.toPrecision(3)), dimension);
  return `${digits} ${unit}`;
}

/** The same where the unit is said elsewhere. */
export function briefDigits(value: number): string {
  return String(Number(value.toPrecision(3)));
}
