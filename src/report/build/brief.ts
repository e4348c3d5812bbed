import { formatExact } from '../../quantity/format-quantity.js';
import { listed } from '../../quantity/listed.js';
import type { Amperes, Dimension, Ratio } from '../../quantity/quantity.js';
import { roundedDown } from '../../quantity/rounded-down.js';

/** A number worked out, for sentences and tables that say nothing of its uncertainty: three digits, none idle. */
export function brief(value: number, dimension: Dimension): string {
  const { value: digits, unit } = formatExact(Number(value.toPrecision(3)), dimension);
  return `${digits} ${unit}`;
}

/** The same where the unit is said elsewhere. */
export function briefDigits(value: number): string {
  return String(Number(value.toPrecision(3)));
}

/** How likely something is; never all and never nothing: nothing measured is that sure. */
export function chance(probability: Ratio): string {
  return `${Math.min(99, Math.max(1, Math.round(100 * probability)))} %`;
}

/** `K1, K2 and K3`. */
export function namesOf({ modules }: { readonly modules: readonly { readonly name: string }[] }): string {
  return listed(modules.map(({ name }) => name));
}

/** A load that was asked for as it was asked for; the recommended one never rounded up. */
export function loadInWords(load: {
  readonly current: Amperes;
  readonly from: 'asked-for' | 'recommended';
}): string {
  if (load.from === 'recommended') return roundedDown(load.current, 'current');
  const { value, unit } = formatExact(load.current, 'current');
  return `${value} ${unit}`;
}
