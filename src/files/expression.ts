import { createRequire } from 'node:module';
import type { RE2JS } from 're2js';
import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import { shown } from '../quantity/shown-text.js';

/** A text that is no expression that we read. */
export class ExpressionError extends RailproofError {
  readonly code = 'EXPRESSION';
  readonly exitCode = exitCodes.badFile;
}

/** Replies are short, and so are the expressions that read them; a long one is a mistake or worse. */
const longestExpression = 200;
/** In parts, counted ones as often as they are counted: what bounds the time of a match, and one has few. */
const largestExpression = 2000;
/** In characters. No reading is longer; nothing is found in what is. */
export const longestSearched = 1000;

/**
 * A regular expression out of a driver file, in the syntax of RE2. The time of a match grows with the length
 * of the text and no faster, whatever the expression: a driver must never keep a run waiting with the load
 * on. So there is no looking ahead or behind, and no referring back. Its `source` is all there is to it.
 */
export class Expression {
  readonly source: string;
  readonly #compiled: RE2JS;

  constructor(source: string) {
    if (source.length > longestExpression) {
      throw new ExpressionError(
        `found an expression of ${source.length} characters; at most ${longestExpression} are allowed`,
      );
    }
    this.source = source;
    this.#compiled = compile(source);
  }

  /** Whether the text, or a part of it, is like this. */
  finds(text: string): boolean {
    return text.length <= longestSearched && this.#compiled.matcher(text).find();
  }

  /** What the group of this name holds in the first match; undefined where there is no match, or none of it. */
  group(name: string, text: string): string | undefined {
    if (text.length > longestSearched || !this.hasGroup(name)) return undefined;
    const matcher = this.#compiled.matcher(text);
    return matcher.find() ? (matcher.group(name) ?? undefined) : undefined;
  }

  hasGroup(name: string): boolean {
    return Object.hasOwn(this.#compiled.namedGroups(), name);
  }
}

/** @throws ExpressionError */
export function expression(source: string): Expression {
  return new Expression(source);
}

function compile(source: string): RE2JS {
  let compiled: RE2JS;
  try {
    compiled = engine().compile(source);
  } catch (error) {
    const why = error instanceof Error ? whyRefused(error.message) : 'is no regular expression';
    throw new ExpressionError(`${shown(source)} ${why}`, { cause: error });
  }
  if (compiled.programSize() <= largestExpression) return compiled;
  throw new ExpressionError(`${shown(source)} counts too far: an expression for a reply needs fewer repeats`);
}

let loaded: typeof RE2JS | undefined;

/** Loaded when the first expression is read: most commands read none, and should not wait for it. */
function engine(): typeof RE2JS {
  loaded ??= (createRequire(import.meta.url)('re2js') as { readonly RE2JS: typeof RE2JS }).RE2JS;
  return loaded;
}

/** The engine says: ``error parsing regexp: missing closing ): `(` ``. */
function whyRefused(message: string): string {
  const [, reason = message, part = ''] = /^error parsing regexp: (.*?)(?:: `(.*)`)?$/s.exec(message) ?? [];
  const neverWaits = 'which is not read here: it can take for ever';
  const [look] = /^\(\?<?[=!]/.exec(part) ?? [];
  if (look !== undefined) return `looks ${look[2] === '<' ? 'behind' : 'ahead'} with ${look}, ${neverWaits}`;
  if (/^\\(?:[1-9]|k)/.test(part)) return `refers back to a group with ${part}, ${neverWaits}`;
  return `is no regular expression: ${reason}${part === '' ? '' : `, in ${shown(part)}`}`;
}
