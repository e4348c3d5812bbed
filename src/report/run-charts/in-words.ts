import type { StepEvidence } from '../../analysis/evidence.js';
import type { Comparable } from '../../judgement/difference.js';
import { formatInterval, formatQuantity } from '../../quantity/format-quantity.js';
import type { Amperes, Dimension, Volts } from '../../quantity/quantity.js';
import type { Result } from '../result.js';

export function amps(value: Amperes): string {
  return formatQuantity(value, 'current', { significant: 4 });
}

/** To five digits: of 15 V that is a millivolt. */
export function volts(value: Volts): string {
  return formatQuantity(value, 'voltage', { significant: 5 });
}

/** A finding's value with its interval: `5.30 A, 95 % from 5.28 to 5.32 A`; at least, where it is a bound. */
export function foundInWords({
  value,
  interval,
  dimension,
  bound,
}: Pick<Comparable, 'value' | 'interval' | 'dimension' | 'bound'>): string {
  if (typeof value !== 'number' || dimension === null) return String(value);
  const least = bound === 'least' ? 'at least ' : '';
  if (interval === null) return `${least}${formatQuantity(value, dimension, { significant: 4 })}`;
  return `${least}${betweenInWords(value, ...interval, dimension)}`;
}

/** `5.30 A, 95 % from 5.28 to 5.32 A`; the value alone where the interval has no width. */
export function betweenInWords(value: number, from: number, to: number, dimension: Dimension): string {
  const { value: text, low, high, unit } = formatInterval(value, from, to, dimension);
  return low === '' ? `${text} ${unit}` : `${text} ${unit}, 95 % from ${low} to ${high} ${unit}`;
}

/** `step 2, load-ramp`. */
export function stepInWords({ step, kind }: Pick<StepEvidence, 'step' | 'kind'>): string {
  return `step ${step}, ${kind}`;
}

/** What a recommendation is called on a chart, on which it may be looked at alone: of what does not conform it is none. */
export function allowedAs({ outcome }: Result): string {
  return outcome === 'does-not-conform' ? 'by its limits alone' : 'recommended';
}
