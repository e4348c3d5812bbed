import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Celsius, Dimension, Kelvins, Ratio, Volts } from '../quantity/quantity.js';

// How a note writes a number: to the digits that a reader can use, not to those that a finding has.

export function amps(current: Amperes): string {
  return formatQuantity(current, 'current', { significant: 3 });
}

export function volts(voltage: Volts): string {
  return formatQuantity(voltage, 'voltage', { significant: 3 });
}

/** To a whole percent, from ten on; else to two digits. */
export function percent(ratio: Ratio): string {
  return formatQuantity(ratio, 'ratio', { significant: Math.abs(ratio) >= 0.9995 ? 3 : 2 });
}

export function kelvins(rise: Kelvins): string {
  return formatQuantity(rise, 'temperature-difference', { significant: 3 });
}

/** Temperatures that a file gave are shown as given; those worked out, to a tenth of a degree. */
export function degrees(temperature: Celsius): string {
  return formatQuantity(Math.round(temperature * 10) / 10, 'temperature');
}

/** What a label or a file says, as it says it; sums of labels without the digits that adding makes. */
export function asGiven(value: number, dimension: Dimension): string {
  return formatQuantity(Number(value.toPrecision(6)), dimension);
}

export function ratedAmperes(current: Amperes): string {
  return asGiven(current, 'current');
}

export function givenPercent(ratio: Ratio): string {
  return asGiven(ratio, 'ratio');
}
