import { decimalExponent, shifted, shiftedText } from './decimal-text.js';
import type { Dimension, QuantityOrAnyShare } from './quantity.js';
import { scalesOf, type Scale } from './units.js';

/**
 * A quantity as people write it, with the prefix that suits its size: `35 mΩ`, `15.21 V`, `12 min`,
 * `-0.2 %`. Every digit is written, so that reading the text gives the same number again; with
 * `significant` it is rounded to that many digits, trailing zeros included (`15.20 V`).
 */
export function formatQuantity(
  value: number,
  dimension: Dimension,
  options: { readonly significant?: number } = {},
): string {
  const scale = suitableScale(value, dimension, options.significant);
  return `${scaledText(value, scale, options.significant)} ${scale.symbol}`;
}

/** As a file would write it: `4 A`, `140 % of rated-current`. */
export function formatShare(quantity: QuantityOrAnyShare, dimension: Dimension): string {
  return quantity.kind === 'absolute'
    ? formatQuantity(quantity.value, dimension)
    : `${formatQuantity(quantity.ratio, 'ratio')} of ${quantity.of}`;
}

const withoutUncertainty = 4;

/** A result in three columns: `15.2100`, `0.0012`, `V`. The uncertainty is empty where there is none. */
export interface UncertainText {
  readonly value: string;
  readonly uncertainty: string;
  readonly unit: string;
}

/**
 * A value and its expanded uncertainty, written as JCGM 100:2008, 7.2.6 advises: the uncertainty to two
 * significant digits, the value to the same decimal place, both in one unit, whose prefix suits the
 * larger of the two. A value without an uncertainty is given four significant digits.
 * @example formatUncertain(15.21, 0.00121, 'voltage'); // => { value: '15.2100', uncertainty: '0.0012', unit: 'V' }
 */
export function formatUncertain(
  value: number,
  expanded: number | undefined,
  dimension: Dimension,
): UncertainText {
  const size = Math.abs(expanded ?? 0);
  if (size === 0 || !Number.isFinite(size) || !Number.isFinite(value)) {
    const scale = suitableScale(value, dimension, withoutUncertainty);
    const uncertainty = expanded === undefined ? '' : scaledText(size, scale, 2);
    return { value: scaledText(value, scale, withoutUncertainty), uncertainty, unit: scale.symbol };
  }
  const scale = suitableScale(Math.max(Math.abs(value), size), dimension, withoutUncertainty);
  const place = decimalExponent(inScale(size, scale), 2) - 1;
  return {
    value: atPlace(inScale(value, scale), place),
    uncertainty: atPlace(inScale(size, scale), place),
    unit: scale.symbol,
  };
}

/** A value and the interval that holds it, in one unit. An end that there is not is empty. */
export interface IntervalText {
  readonly value: string;
  readonly low: string;
  readonly high: string;
  readonly unit: string;
}

/**
 * A value between two limits that need not lie alike on both sides of it: as {@link formatUncertain}, all three
 * to the decimal place of the second digit of the larger distance.
 * @example formatInterval(9.68, 9.52, 9.85, 'current'); // => { value: '9.68', low: '9.52', high: '9.85', unit: 'A' }
 */
export function formatInterval(value: number, low: number, high: number, dimension: Dimension): IntervalText {
  const ends = [low, high].filter(Number.isFinite);
  const half = Math.max(0, ...ends.map((end) => Math.abs(end - value)));
  // What adding and multiplying lose is no interval.
  if (!(half > 1e-9 * Math.abs(value))) {
    const { value: text, unit } = formatExact(value, dimension);
    return { value: text, low: '', high: '', unit };
  }
  const text = formatUncertain(value, half, dimension);
  const scale = scaleNamed(text.unit, dimension);
  const place = decimalExponent(inScale(half, scale), 2) - 1;
  const written = (end: number): string => (Number.isFinite(end) ? atPlace(inScale(end, scale), place) : '');
  return { value: text.value, low: written(low), high: written(high), unit: text.unit };
}

/** What has no uncertainty, a nominal value or a bound: up to four significant digits, none of them idle. */
export function formatExact(value: number, dimension: Dimension): UncertainText {
  const text = formatUncertain(value, undefined, dimension);
  return { ...text, value: text.value.includes('.') ? text.value.replace(/\.?0+$/, '') : text.value };
}

/**
 * The largest scale in which the value is at least 1. Times from two minutes on are in minutes or hours
 * where that makes a rounder number of them, or where it is rounded anyway.
 */
function suitableScale(value: number, dimension: Dimension, significant?: number): Scale {
  const scales = scalesOf(dimension);
  const fits = (scale: Scale): boolean => {
    if (scale.factor === 1) return decimalExponent(value, significant) >= scale.shift;
    return Math.abs(value) >= 2 * scale.factor && readsWell(value, scale, significant);
  };
  const unprefixed = scales.find((scale) => scale.factor === 1 && scale.shift >= 0) ?? scales[0];
  const chosen = value === 0 || !Number.isFinite(value) ? unprefixed : (scales.findLast(fits) ?? scales[0]);
  if (chosen === undefined) throw new RangeError(`no unit for ${dimension}`);
  return chosen;
}

function scaleNamed(symbol: string, dimension: Dimension): Scale {
  const scale = scalesOf(dimension).find((each) => each.symbol === symbol);
  if (scale === undefined) throw new RangeError(`no unit ${symbol} for ${dimension}`);
  return scale;
}

/** The number alone, in the scale. */
function scaledText(value: number, scale: Scale, significant?: number): string {
  if (Number.isNaN(value)) return 'not a number';
  if (!Number.isFinite(value)) return value > 0 ? '∞' : '-∞';
  if (value === 0) return '0';
  if (scale.factor !== 1) return shiftedText(value / scale.factor, 0, significant);
  return shiftedText(value, -scale.shift, significant);
}

function readsWell(value: number, scale: Scale, significant: number | undefined): boolean {
  if (significant !== undefined) return true;
  const text = shiftedText(value / scale.factor, 0);
  return text.length <= 5 && Number(text) * scale.factor === value;
}

function inScale(value: number, scale: Scale): number {
  return scale.factor === 1 ? shifted(value, -scale.shift) : value / scale.factor;
}

/** Rounded to the decimal place of ten to the power of `place`, and never `-0`. */
function atPlace(value: number, place: number): string {
  if (place > 0) return String(shifted(Math.round(shifted(value, -place)), place) + 0);
  const text = value.toFixed(Math.min(-place, 100));
  return Number(text) === 0 ? text.replace('-', '') : text;
}
