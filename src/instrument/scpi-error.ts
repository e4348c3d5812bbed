import { ReplyNotUnderstoodError } from './reply-errors.js';

/** One entry of an instrument's error queue. */
export interface ScpiError {
  readonly number: number;
  /** The standard's words, then after a semicolon the instrument's own, where it has any. */
  readonly text: string;
}

/**
 * Numbers and texts of SCPI-1999, volume 2, chapter 21 (SCPI Consortium), as public programming manuals
 * state them; those marked are from memory.
 */
export const standardErrors = {
  '0': 'No error',
  '-100': 'Command error',
  '-101': 'Invalid character', // from memory
  '-102': 'Syntax error',
  '-103': 'Invalid separator',
  '-104': 'Data type error',
  '-108': 'Parameter not allowed',
  '-109': 'Missing parameter',
  '-110': 'Command header error',
  '-111': 'Header separator error',
  '-112': 'Program mnemonic too long',
  '-113': 'Undefined header',
  '-114': 'Header suffix out of range',
  '-120': 'Numeric data error',
  '-121': 'Invalid character in number',
  '-123': 'Exponent too large',
  '-124': 'Too many digits',
  '-128': 'Numeric data not allowed',
  '-130': 'Suffix error',
  '-131': 'Invalid suffix',
  '-134': 'Suffix too long',
  '-138': 'Suffix not allowed',
  '-140': 'Character data error',
  '-141': 'Invalid character data',
  '-144': 'Character data too long',
  '-200': 'Execution error',
  '-221': 'Settings conflict', // from memory
  '-222': 'Data out of range',
  '-224': 'Illegal parameter value',
  '-230': 'Data corrupt or stale', // from memory
  '-300': 'Device-specific error', // from memory
  '-350': 'Queue overflow',
  '-400': 'Query error', // from memory
  '-410': 'Query INTERRUPTED', // from memory
  '-420': 'Query UNTERMINATED', // from memory
  '-430': 'Query DEADLOCKED', // from memory
  '-440': 'Query UNTERMINATED after indefinite response', // from memory
} as const satisfies Readonly<Record<string, string>>;

/**
 * Reads an answer to SYSTem:ERRor?: `-113,"Undefined header;extra"`. Lenient: quotes may be single or
 * missing, doubled quotes stand for one, spaces are free, and without a text the standard's own is given.
 * @throws ReplyNotUnderstoodError when it does not begin with a whole number.
 */
export function parseScpiError(
  reply: string,
  about: { readonly address?: string; readonly question?: string } = {},
): ScpiError {
  const comma = reply.indexOf(',');
  const number = (comma === -1 ? reply : reply.slice(0, comma)).trim();
  if (!/^[+-]?\d{1,9}$/.test(number)) {
    throw new ReplyNotUnderstoodError({
      ...about,
      reply,
      expected: 'an entry of the error queue (a whole number, a comma, a text)',
    });
  }
  const value = Number(number) + 0;
  const text = comma === -1 ? '' : unquoted(reply.slice(comma + 1).trim());
  return { number: value, text: text === '' ? standardText(value) : text };
}

/** The standard's text for a number; empty for the instruments' own numbers. */
export function standardText(number: number): string {
  return Object.hasOwn(standardErrors, number)
    ? standardErrors[`${number}` as keyof typeof standardErrors]
    : '';
}

function unquoted(text: string): string {
  const quote = text[0];
  if (quote !== '"' && quote !== "'") return text;
  const closed = text.length > 1 && text.endsWith(quote);
  return text.slice(1, closed ? -1 : undefined).replaceAll(quote + quote, quote);
}
