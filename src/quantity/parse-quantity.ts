import { dimensionWords, needed } from './dimension-words.js';
import { didYouMean } from './nearest.js';
import {
  bareNumber,
  decimalComma,
  notThat,
  otherDimension,
  QuantityError,
  tooLarge,
  unknownUnit,
} from './quantity-error.js';
import {
  baseline,
  references,
  type Dimension,
  type QuantityOrAnyShare,
  type QuantityOrShare,
  type ReferenceName,
} from './quantity.js';
import { shown } from './shown-text.js';
import { readUnit, spellingsOf } from './units.js';

export { QuantityError };

/** No quantity needs more characters; a longer text is refused unread. */
export const longestQuantity = 64;

// `2.5`, `-3`, `1e-3`, `.5`; as text, since it becomes part of longer patterns.
const numberPattern = String.raw`[+-]?(?:\d+(?:\.\d+)?|\.\d+)(?:[eE][+-]?\d{1,3})?`;

const numberAndUnit = new RegExp(`^(${numberPattern})(?: ?([\\p{L}%°].*))?$`, 'su');
const share = new RegExp(`^(${numberPattern}) ?%(?: of (.*))?$`, 's');

/**
 * Reads a quantity with its unit into the unit of its dimension: `35 mΩ` is 0.035, `1.5 min` is 90,
 * `5 %` is 0.05. Correctly rounded: a prefix moves the decimal point before anything becomes binary.
 * @throws QuantityError
 * @example parseQuantity('400 mA', 'current'); // => 0.4
 */
export function parseQuantity(text: string, dimension: Dimension): number {
  refuseOverlong(text, dimension);
  const [, digits, symbol] = numberAndUnit.exec(text) ?? [];
  if (digits === undefined) throw notANumber(text, dimension);
  if (symbol === undefined) throw bareNumber(text, dimension);
  const unit = readUnit(symbol);
  if (unit === undefined) throw unknownUnit(symbol, text, dimension);
  if (unit.dimension !== dimension) throw otherDimension(text, unit.dimension, dimension);
  const value = readDecimal(digits, unit.shift) * unit.factor;
  if (!Number.isFinite(value)) throw tooLarge(text, dimension);
  return value;
}

/**
 * The same for a value straight out of a file, where anything may stand.
 * @throws QuantityError
 */
export function readQuantity(value: unknown, dimension: Dimension): number {
  return parseQuantity(quantityText(value, dimension), dimension);
}

/** A regular expression, for JSON Schema, of what {@link parseQuantity} takes (but for length and size). */
export function quantityPattern(dimension: Dimension): string {
  return `^${numberPattern} ?(?:${spellingsOf(dimension).join('|')})$`;
}

/**
 * Reads a quantity, or a share of one that will be known when it is needed: `140 % of rated-current`.
 * What it refers to must be of the same dimension.
 * @throws QuantityError
 */
export function parseQuantityOrShare(text: string, dimension: Dimension): QuantityOrShare {
  return parseShareOf(text, dimension, (name) => readReference(name, dimension));
}

/**
 * The same for a criterion, which may also ask for a share of the same finding in the baseline record,
 * whatever its dimension: `120 % of baseline`.
 * @throws QuantityError
 */
export function parseQuantityOrAnyShare(text: string, dimension: Dimension): QuantityOrAnyShare {
  return parseShareOf(text, dimension, (name) =>
    name === baseline ? name : readReference(name, dimension, [baseline]),
  );
}

function parseShareOf<Reference>(
  text: string,
  dimension: Dimension,
  reference: (name: string) => Reference,
):
  | { readonly kind: 'absolute'; readonly value: number }
  | { readonly kind: 'share'; readonly ratio: number; readonly of: Reference } {
  refuseOverlong(text, dimension);
  const [, digits, name] = share.exec(text) ?? [];
  if (digits === undefined || (name === undefined && dimension === 'ratio')) {
    return { kind: 'absolute', value: parseQuantity(text, dimension) };
  }
  if (name === undefined) throw shareOfNothing(text, dimension);
  const ratio = readDecimal(digits, -2);
  if (!Number.isFinite(ratio)) throw tooLarge(text, dimension);
  return { kind: 'share', ratio, of: reference(name) };
}

/**
 * The same for a value straight out of a file, where anything may stand.
 * @throws QuantityError
 */
export function readQuantityOrShare(value: unknown, dimension: Dimension): QuantityOrShare {
  return parseQuantityOrShare(quantityText(value, dimension), dimension);
}

/**
 * As {@link parseQuantityOrAnyShare}, for a value straight out of a file, where anything may stand.
 * @throws QuantityError
 */
export function readQuantityOrAnyShare(value: unknown, dimension: Dimension): QuantityOrAnyShare {
  return parseQuantityOrAnyShare(quantityText(value, dimension), dimension);
}

/** A regular expression, for JSON Schema, of what {@link parseQuantityOrShare} takes; `names` are what a share may refer to. */
export function quantityOrSharePattern(
  dimension: Dimension,
  names: readonly (ReferenceName | typeof baseline)[] = referencesTo(dimension),
): string {
  if (names.length === 0) return quantityPattern(dimension);
  return `^${numberPattern} ?(?:${spellingsOf(dimension).join('|')}|% of (?:${names.join('|')}))$`;
}

/** The number that `digits` times ten to the power of `shift` is nearest to. */
function readDecimal(digits: string, shift: number): number {
  const [mantissa = '', exponent = '0'] = digits.split(/e/i);
  return Number(`${mantissa}e${Number(exponent) + shift}`);
}

function refuseOverlong(text: string, dimension: Dimension): void {
  if (text.length > longestQuantity) throw notThat(`a text of ${text.length} characters`, dimension);
}

function quantityText(value: unknown, dimension: Dimension): string {
  if (typeof value === 'string') return value;
  if (typeof value === 'number' || typeof value === 'bigint') throw bareNumber(String(value), dimension);
  if (typeof value === 'boolean') throw notThat(String(value), dimension);
  if (value === null || value === undefined) throw notThat('nothing', dimension);
  throw notThat(Array.isArray(value) ? 'a list' : 'a map', dimension);
}

function notANumber(text: string, dimension: Dimension): QuantityError {
  if (/^[+-]?\d+,\d/.test(text)) return decimalComma(text, dimension);
  return notThat(shown(text), dimension);
}

/** What a share of this dimension may refer to. */
export function referencesTo(dimension: Dimension): readonly ReferenceName[] {
  return (Object.keys(references) as ReferenceName[]).filter((name) => references[name] === dimension);
}

/** `besides` are names that will do here too. */
function readReference(name: string, dimension: Dimension, besides: readonly string[] = []): ReferenceName {
  if (name === baseline) {
    const message = `${shown(name)} is known only when all is done, so only a criterion may refer to it`;
    throw shareError(`${message}; ${mayReferTo(dimension)}`, name, dimension);
  }
  const names = [...referencesTo(dimension), ...besides];
  if (!Object.hasOwn(references, name)) {
    const guess = didYouMean(name, names);
    const hint = guess === '' ? `; ${mayReferTo(dimension)}` : guess;
    throw shareError(`nothing is called ${shown(name)}${hint}`, name, dimension);
  }
  const reference = name as ReferenceName;
  if (references[reference] !== dimension) {
    const kind = dimensionWords[references[reference]].name;
    throw shareError(`${shown(name)} is ${kind}; ${mayReferTo(dimension)}`, name, dimension);
  }
  return reference;
}

function shareOfNothing(text: string, dimension: Dimension): QuantityError {
  const [first] = referencesTo(dimension);
  const message =
    first === undefined
      ? `found ${shown(text)}, which is a ratio; ${needed(dimension)}`
      : `found ${shown(text)}, but not what it is a share of: ${text} of ${first}`;
  return shareError(message, text, dimension);
}

function mayReferTo(dimension: Dimension): string {
  const names = referencesTo(dimension);
  const { name } = dimensionWords[dimension];
  return names.length === 0
    ? `${name} cannot be given as a share`
    : `a share that gives ${name} refers to ${names.join(' or ')}`;
}

function shareError(message: string, found: string, dimension: Dimension): QuantityError {
  return new QuantityError(message, { found: shown(found), expected: mayReferTo(dimension) });
}
