import * as z from '../libraries/zod.js';
import { RailproofError } from '../errors/railproof-error.js';
import { dimensionWords, needed } from '../quantity/dimension-words.js';
import { formatQuantity, formatShare } from '../quantity/format-quantity.js';
import {
  quantityOrSharePattern,
  quantityPattern,
  QuantityError,
  readQuantity,
  readQuantityOrShare,
  referencesTo,
} from '../quantity/parse-quantity.js';
import type { Dimension, QuantityOrShare, ReferenceName } from '../quantity/quantity.js';
import { shown } from '../quantity/shown-text.js';
import { namePattern } from './name-pattern.js';
import { didYouMean } from '../quantity/nearest.js';
import { found } from './plain-words.js';

/** A key whose value is written as text and read into something else. */
export type TextSchema<T> = z.ZodPipe<z.ZodString, z.ZodTransform<T, string>>;

/** In the unit of the dimension. */
export interface Bounds {
  readonly above?: number;
  readonly least?: number;
  readonly most?: number;
}

/**
 * A quantity with its unit. For an optional one, `.exactOptional()`; for one with a default,
 * `.prefault('5 s')`, so that the schema shows the default as a file would write it.
 */
export function quantity(dimension: Dimension, description: string, bounds: Bounds = {}): TextSchema<number> {
  const meta = { description, pattern: quantityPattern(dimension), examples: examplesOf(dimension) };
  return readFromText(meta, needed(dimension), (value) => {
    const number = readQuantity(value, dimension);
    checkBounds(number, String(value), dimension, bounds);
    return number;
  });
}

/** A quantity, or a share of a reference; `least: 0` and `above: 0` bound a share too. */
export function quantityOrShare(
  dimension: Dimension,
  description: string,
  bounds: Bounds = {},
): TextSchema<QuantityOrShare> {
  const shares = referencesTo(dimension).map((name) => `100 % of ${name}`);
  const examples = [...examplesOf(dimension), ...shares];
  const meta = { description, pattern: quantityOrSharePattern(dimension), examples };
  return readFromText(meta, needed(dimension), (value) => {
    const read = readQuantityOrShare(value, dimension);
    if (read.kind === 'absolute') checkBounds(read.value, String(value), dimension, bounds);
    else checkShare(read, dimension, bounds);
    return read;
  });
}

/** A quantity, or a share of the nameplate: for what must be known before anything is measured. */
export function quantityOrNameplateShare(
  dimension: 'voltage' | 'current',
  description: string,
  bounds: Bounds = {},
): TextSchema<QuantityOrShare> {
  const label: ReferenceName = `rated-${dimension}`;
  const meta = {
    description,
    pattern: quantityOrSharePattern(dimension, [label]),
    examples: [...examplesOf(dimension), `110 % of ${label}`],
  };
  return readFromText(meta, needed(dimension), (value) => {
    const read = readQuantityOrShare(value, dimension);
    if (read.kind === 'absolute') checkBounds(read.value, String(value), dimension, bounds);
    else if (read.of === label) checkShare(read, dimension, bounds);
    else throw notOnTheLabel(read.of, label);
    return read;
  });
}

/** A quantity, or one of a few words in its place: `unknown`. */
export function quantityOrWord<W extends string>(
  dimension: Dimension,
  words: readonly W[],
  description: string,
  bounds: Bounds = {},
): TextSchema<number | W> {
  const pattern = `^(?:${words.join('|')})$|${quantityPattern(dimension)}`;
  const meta = { description, pattern, examples: [...words, ...examplesOf(dimension)] };
  const either = `${words.join(', ')}, or ${needed(dimension)}`;
  return readFromText(meta, either, (value) => {
    const word = words.find((each) => each === value);
    if (word !== undefined) return word;
    if (typeof value === 'string' && /^[a-z]/i.test(value)) throw neitherNor(value, words, either);
    const number = readQuantity(value, dimension);
    checkBounds(number, String(value), dimension, bounds);
    return number;
  });
}

/** A whole number without a unit. */
export function count(
  description: string,
  bounds: { readonly least: number; readonly most: number },
): z.ZodInt {
  return z.int().min(bounds.least).max(bounds.most).meta({ description });
}

/** One of a few words. */
export function choice<const W extends readonly [string, ...string[]]>(
  words: W,
  description: string,
): z.ZodEnum<{ [K in W[number]]: K }> {
  return z.enum(words).meta({ description });
}

/** What may become the name of a folder. */
export function name(description: string, examples: string[] = []): z.ZodString {
  return z
    .string()
    .regex(namePattern, {
      error: ({ input }) =>
        `${found(input)}; a name is needed: 1 to 64 letters, digits, '.', '_' or '-', not starting with '.'`,
    })
    .meta({ description, ...(examples.length > 0 ? { examples } : {}) });
}

/** Free text on one line; nothing in it may steer a terminal. */
export function line(description: string, longest = 200): z.ZodString {
  return freeText(/^[^\p{Cc}\p{Cs}\u2028-\u202e\u2066-\u2069]*$/u, description, longest);
}

/** Free text of several lines. */
export function paragraph(description: string, longest = 4000): z.ZodString {
  return freeText(/^(?:\n|[^\p{Cc}\p{Cs}\u2028-\u202e\u2066-\u2069])*$/u, description, longest);
}

/**
 * Text that `read` understands. It is also given what is no text at all, and must then throw an error
 * that says what is needed; `missing` says so where the key is not there.
 */
export function readFromText<T>(
  meta: { description: string; pattern?: string; examples?: string[] },
  missing: string,
  read: (value: unknown) => T,
): TextSchema<T> {
  const complaint = (value: unknown): string => {
    if (value === undefined) return `missing; ${missing}`;
    try {
      read(value);
    } catch (error) {
      if (error instanceof RailproofError) return error.message;
      throw error;
    }
    return `${found(value)}; ${missing}`;
  };
  return z
    .string({ error: ({ input }) => complaint(input) })
    .meta(meta)
    .transform((text, context) => {
      try {
        return read(text);
      } catch (error) {
        if (!(error instanceof RailproofError)) throw error;
        context.addIssue({ code: 'custom', message: error.message, input: text });
        return z.NEVER;
      }
    });
}

function freeText(pattern: RegExp, description: string, longest: number): z.ZodString {
  return (
    z
      .string()
      // Before its ends are trimmed, as whoever reads the JSON Schema measures it.
      .max(longest)
      .trim()
      // Not as a `pattern` in the JSON Schema: editors differ in which character classes they know.
      .refine((text) => pattern.test(text), {
        error: ({ input }) => `${found(input)}; control characters are not allowed here`,
      })
      .meta({ description })
  );
}

function examplesOf(dimension: Dimension): string[] {
  return [...dimensionWords[dimension].examples];
}

function notOnTheLabel(name: ReferenceName, label: ReferenceName): QuantityError {
  const expected = `a share here refers to ${label}`;
  return new QuantityError(`${shown(name)} is known only once it has been measured; ${expected}`, {
    found: shown(name),
    expected,
  });
}

function neitherNor(value: string, words: readonly string[], expected: string): QuantityError {
  const hint = didYouMean(value, words) || `; ${expected}`;
  return new QuantityError(`${found(value)}${hint}`, { found: shown(value), expected });
}

function checkBounds(value: number, text: string, dimension: Dimension, bounds: Bounds): void {
  const { above, least, most } = bounds;
  const refuse = (limit: string): never => {
    throw new QuantityError(`found ${shown(text)}; ${limit} is needed`, {
      found: shown(text),
      expected: limit,
    });
  };
  if (above !== undefined && !(value > above)) refuse(`more than ${formatQuantity(above, dimension)}`);
  if (least !== undefined && value < least) refuse(`at least ${formatQuantity(least, dimension)}`);
  if (most !== undefined && value > most) refuse(`at most ${formatQuantity(most, dimension)}`);
}

/** Only the sign of a share can be judged before its whole is known. */
function checkShare(read: QuantityOrShare & { kind: 'share' }, dimension: Dimension, bounds: Bounds): void {
  const text = formatShare(read, dimension);
  if (bounds.above === 0) checkBounds(read.ratio, text, 'ratio', { above: 0 });
  if (bounds.least === 0) checkBounds(read.ratio, text, 'ratio', { least: 0 });
}
