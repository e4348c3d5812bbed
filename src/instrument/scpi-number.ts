import { ReplyNotUnderstoodError } from './reply-errors.js';

/** What a number in a reply says. Overload and not-a-number are never values. */
export type Measurement =
  | { readonly kind: 'value'; readonly value: number }
  | { readonly kind: 'overload' }
  | { readonly kind: 'not-a-number' };

// SCPI-99, volume 1, 7.2.1: 9.9E37 stands for infinity (from memory), 9.91E37 for not-a-number (public manuals).
const infinity = 9.9e37;
const notANumber = 9.91e37;
/** They come rounded to single precision or to a few digits, and still are 1 in 1000 apart. */
const tolerance = 1e-6;

/** IEEE 488.2 sets 255 digits; with sign, point and exponent no number is longer than this. */
const longest = 300;

/** NR1, NR2 and NR3, with or without the point and the signs; each part can match in one way only. */
const decimal = /^[+-]?(?:\d+(?:\.\d*)?|\.\d+)(?:E[+-]?\d+)?$/i;
const words: Readonly<Record<string, Measurement['kind']>> = {
  NAN: 'not-a-number',
  INF: 'overload',
  INFINITY: 'overload',
  NINF: 'overload',
};

/**
 * Reads a numeric reply: IEEE 488.2 NR1, NR2 or NR3, taken leniently (no point in NR3, no sign of the
 * exponent, a leading plus, any case, spaces around), or one of SCPI's words for what is no value.
 * Magnitudes from 9.9E37 on are overload, 9.91E37 is not-a-number, each within 1 in 10⁶.
 * @throws ReplyNotUnderstoodError for anything else, a unit included.
 */
export function parseScpiNumber(
  text: string,
  about: { readonly address?: string; readonly question?: string } = {},
): Measurement {
  const trimmed = text.length <= longest ? text.trim() : '';
  if (decimal.test(trimmed)) return measurementOf(Number(trimmed));
  const word = words[trimmed.replace(/^[+-]/, '').toUpperCase()];
  if (word === 'overload' || word === 'not-a-number') return { kind: word };
  throw new ReplyNotUnderstoodError({ ...about, reply: text, expected: 'a bare number' });
}

function measurementOf(value: number): Measurement {
  if (Math.abs(value / notANumber - 1) <= tolerance) return { kind: 'not-a-number' };
  if (Math.abs(value) >= infinity * (1 - tolerance)) return { kind: 'overload' };
  return { kind: 'value', value };
}

/**
 * A number as any instrument accepts it: plain decimals, at most six of them, no trailing zeros, no minus
 * before zero; an exponent only from 10⁹ on.
 * @throws RangeError for a number that is not finite.
 */
export function formatScpiNumber(value: number): string {
  if (!Number.isFinite(value)) throw new RangeError(`An instrument cannot be told ${value}.`);
  if (Math.abs(value) >= 1e9) return value.toExponential().toUpperCase();
  const text = value.toFixed(6).replace(/\.?0+$/, '');
  return text === '-0' ? '0' : text;
}
