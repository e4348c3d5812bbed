import type * as z from '../libraries/zod.js';
import { shown } from '../quantity/shown-text.js';
import { didYouMean } from '../quantity/nearest.js';

/** An issue as zod hands it to an error map: the value is still there. */
type RawIssue = z.core.$ZodRawIssue;

/** Says in plain words what was found and what is needed; zod's own words never reach a user. */
export function plainWords(issue: RawIssue): string {
  switch (issue.code) {
    case 'invalid_type':
      return `${found(issue.input)}; ${typeWords[expectedType(issue)] ?? issue.expected} is needed`;
    case 'invalid_value':
      return notAmong(issue.input, issue.values.map(String));
    case 'unrecognized_keys':
      return issue.keys.map((key) => unknownKey(key, knownKeys(issue))).join('\n');
    case 'invalid_union':
      return discriminated(issue) ?? `${found(issue.input)}; something else is needed here`;
    case 'too_small':
      return `${bounded(issue)}at least ${issue.minimum}${unitOf(issue.origin)} needed`;
    case 'too_big':
      return `${bounded(issue)}at most ${issue.maximum}${unitOf(issue.origin)} allowed`;
    case 'invalid_key':
      return `the key ${shown(String(issue.input))} is not allowed here`;
    case 'invalid_format':
    case 'invalid_element':
    case 'not_multiple_of':
    case 'custom':
      return issue.message ?? `${found(issue.input)}, which will not do here`;
  }
}

/** `found 'volage'`, `found the number 4`, `missing`. */
export function found(value: unknown): string {
  if (value === undefined) return 'missing';
  if (value === null) return 'found nothing';
  if (typeof value === 'string') return `found ${shown(value)}`;
  if (typeof value === 'number') return `found the number ${value}`;
  if (typeof value === 'boolean') return `found ${value}`;
  return Array.isArray(value) ? 'found a list' : 'found a map';
}

/** Between shorter words one letter makes another word, and a guess the opposite of what was meant: AC, DC. */
const shortestGuessed = 4;

/** A word that is none of the ones allowed here. */
export function notAmong(value: unknown, allowed: readonly string[]): string {
  const choice = allowed.length === 1 ? `'${allowed[0] ?? ''}'` : `one of ${allowed.join(', ')}`;
  const guess =
    typeof value === 'string' && value.length >= shortestGuessed ? didYouMean(value, allowed) : '';
  return `${found(value)}${guess === '' ? `; ${choice} is needed` : guess}`;
}

/** `unknown key 'volage'; did you mean 'voltage'?` */
export function unknownKey(key: string, known: readonly string[]): string {
  const guess = didYouMean(key, known);
  const hint =
    guess !== '' ? guess : known.length === 0 ? '; none is known here' : `; known here: ${known.join(', ')}`;
  return `unknown key ${shown(key)}${hint}`;
}

/** Of a whole number zod first says that it expects a number. */
function expectedType(issue: RawIssue & { readonly code: 'invalid_type' }): string {
  const definition = issue.inst?._zod.def;
  const isWhole = definition !== undefined && 'format' in definition && definition.format === 'safeint';
  return isWhole ? 'int' : issue.expected;
}

function knownKeys(issue: RawIssue): string[] {
  const definition = issue.inst?._zod.def;
  return definition !== undefined && 'shape' in definition ? Object.keys(definition.shape as object) : [];
}

function discriminated(issue: RawIssue): string | undefined {
  if (!('discriminator' in issue) || !('options' in issue) || !Array.isArray(issue.options)) return undefined;
  const { input, discriminator } = issue;
  const isMap = typeof input === 'object' && input !== null;
  const value = isMap ? (input as Record<string, unknown>)[String(discriminator)] : input;
  return notAmong(value, issue.options.map(String));
}

function bounded(issue: { readonly input?: unknown; readonly origin: string }): string {
  const { input } = issue;
  if (issue.origin === 'array' && Array.isArray(input)) return `found ${input.length} of them; `;
  if (issue.origin === 'string' && typeof input === 'string') return `found ${input.length} characters; `;
  return `${found(input)}; `;
}

function unitOf(origin: string): string {
  if (origin === 'array') return ' are';
  if (origin === 'string') return ' characters are';
  return ' is';
}

const typeWords: Readonly<Record<string, string>> = {
  string: 'a text',
  number: 'a number',
  int: 'a whole number',
  boolean: 'true or false',
  object: 'a map of keys',
  record: 'a map of keys',
  array: 'a list',
};
