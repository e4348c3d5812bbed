import { ScpiErrorNumber } from './scpi-errors.js';

/** The multipliers of IEEE 488.2, 7.7.3; M is milli for volts and amperes. */
const multipliers = new Map([
  ['', 1],
  ['U', 1e-6],
  ['M', 1e-3],
  ['K', 1e3],
]);

export interface NumberRange {
  readonly unit: 'V' | 'A' | 'W';
  readonly least: number;
  readonly most: number;
}

/**
 * Reads a decimal number in any of its forms (NRf), with or without the unit, or MINimum and MAXimum.
 * An error is the negative number that goes on the queue.
 */
export function numberParameter(
  text: string,
  { unit, least, most }: NumberRange,
): { value: number } | { error: number } {
  if (/^MIN(IMUM)?$/i.test(text)) return { value: least };
  if (/^MAX(IMUM)?$/i.test(text)) return { value: most };
  const [, digits, suffix = ''] =
    /^([+-]?(?:\d+(?:\.\d*)?|\.\d+)(?:E[+-]?\d+)?)\s*([A-Z]*)$/i.exec(text) ?? [];
  if (digits === undefined) return { error: ScpiErrorNumber.dataType };
  const upper = suffix.toUpperCase();
  const multiplier =
    upper === '' ? 1 : upper.endsWith(unit) ? multipliers.get(upper.slice(0, -1)) : undefined;
  if (multiplier === undefined) return { error: ScpiErrorNumber.invalidSuffix };
  const value = Number(digits) * multiplier;
  return value >= least && value <= most ? { value } : { error: ScpiErrorNumber.outOfRange };
}

/** A number as instruments send it, NR3 of IEEE 488.2, 8.7.4: `+1.521000E+01`; what is none is 9.91E37. */
export function nr3(value: number): string {
  if (Number.isNaN(value)) return '+9.91E+37';
  if (!Number.isFinite(value)) return value > 0 ? '+9.9E+37' : '-9.9E+37';
  const [mantissa = '0', exponent = '+0'] = value.toExponential(6).split('e');
  const sign = mantissa.startsWith('-') ? '' : '+';
  return `${sign}${mantissa}E${exponent.slice(0, 1)}${exponent.slice(1).padStart(2, '0')}`;
}
