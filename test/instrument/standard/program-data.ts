import { StandardError } from './errors.js';
import type { Text } from './text.js';

/** One data element as it is written, before anybody knows what is wanted (IEEE 488.2, 7.7). */
export type Element =
  /** `suffix` is in capitals, and empty where there is none. */
  | { readonly kind: 'number'; readonly value: number; readonly suffix: string }
  | { readonly kind: 'word'; readonly word: string }
  | { readonly kind: 'string'; readonly text: string }
  /** What stands between the parentheses. */
  | { readonly kind: 'expression'; readonly text: string }
  | { readonly kind: 'block' };

/** IEEE 488.2, 7.7.2.4: what a device need not take. */
const mostDigits = 255;
const largestExponent = 32000;
const longest = 12;

/**
 * The element that begins here.
 * @throws StandardError
 */
export function elementAt(text: Text): Element {
  if (text.isAt(/["']/)) return stringAt(text);
  if (text.isAt(/[-+.0-9]/)) return decimalAt(text);
  if (text.isAt(/[A-Za-z]/)) return wordAt(text);
  if (text.takeIf('(')) return expressionAt(text);
  if (text.takeIf('#')) return text.isAt(/\d/) ? blockAt(text) : otherBaseAt(text);
  throw new StandardError(text.isAtEnd() || text.isAt(/[,;:?*]/) ? -102 : -101);
}

function wordAt(text: Text): Element {
  const word = text.take(/[A-Za-z][A-Za-z0-9_]*/);
  if (word.length > longest) throw new StandardError(-144);
  return { kind: 'word', word };
}

/** In double quotes or in single ones; doubled, the quote stands for itself. */
function stringAt(text: Text): Element {
  const quote = text.next();
  text.expect(quote);
  let content = '';
  for (;;) {
    content += text.take(quote === '"' ? /[^"]*/ : /[^']*/);
    if (!text.takeIf(quote)) throw new StandardError(-151);
    if (!text.takeIf(quote)) return { kind: 'string', text: content };
    content += quote;
  }
}

/** NRf: any of NR1, NR2 and NR3, with white space before the exponent, then perhaps a suffix. */
function decimalAt(text: Text): Element {
  const mantissa = text.take(/[-+]?(?:\d+(?:\.\d*)?|\.\d+)/);
  if (mantissa === '') throw new StandardError(-120);
  if (mantissa.replace(/^[-+]?0*/, '').replace('.', '').length > mostDigits) throw new StandardError(-124);
  const exponent = text.take(/\s*[Ee]\s*[-+]?\d+/).replace(/[^-+\d]/g, '');
  if (Math.abs(Number(exponent)) > largestExponent) throw new StandardError(-123);
  if (text.isAt(/[-+."'#(]/)) throw new StandardError(-121);
  return {
    kind: 'number',
    value: Number(exponent === '' ? mantissa : `${mantissa}E${exponent}`),
    suffix: suffixAt(text),
  };
}

function suffixAt(text: Text): string {
  text.skipWhite();
  const suffix = text.take(/\/?[A-Za-z]+(?:-?\d)?(?:[./][A-Za-z]+(?:-?\d)?)*/).toUpperCase();
  if (suffix.length > longest) throw new StandardError(-134);
  return suffix;
}

const bases: Readonly<Record<string, { readonly base: number; readonly digits: RegExp }>> = {
  H: { base: 16, digits: /[0-9A-Fa-f]+/ },
  Q: { base: 8, digits: /[0-7]+/ },
  B: { base: 2, digits: /[01]+/ },
};

function otherBaseAt(text: Text): Element {
  const known = bases[text.take(/[A-Za-z]/).toUpperCase()];
  if (known === undefined) throw new StandardError(-102);
  const digits = text.take(known.digits);
  if (digits === '' || text.isAt(/\w/)) throw new StandardError(-121);
  return { kind: 'number', value: Number.parseInt(digits, known.base), suffix: '' };
}

function expressionAt(text: Text): Element {
  const content = text.take(/[^()"'#;]*/);
  if (!text.takeIf(')')) throw new StandardError(-171);
  return { kind: 'expression', text: content };
}

/** Nothing here takes a block, and where it ends only its length tells: the rest is let go with it. */
function blockAt(text: Text): Element {
  text.takeRest();
  return { kind: 'block' };
}
