import type * as z from '../libraries/zod.js';
import { nearest } from '../quantity/nearest.js';
import { plainWords } from './plain-words.js';
import type { Complaint } from './yaml-document.js';

export type Checked<T> =
  | { readonly kind: 'good'; readonly value: T }
  | { readonly kind: 'bad'; readonly complaints: readonly Complaint[] };

/** Puts a value from a file through a schema; `path` is where the value stands in the file. */
export function checkValue<T>(
  schema: z.ZodType<T>,
  value: unknown,
  path: readonly PropertyKey[] = [],
): Checked<T> {
  const result = schema.safeParse(value, { error: plainWords });
  if (result.success) return { kind: 'good', value: result.data };
  const complaints = withoutTwins(
    result.error.issues.flatMap((issue) => told(issue, [])),
    value,
  );
  return { kind: 'bad', complaints: complaints.map((each) => ({ ...each, path: [...path, ...each.path] })) };
}

function told(issue: z.core.$ZodIssue, before: readonly PropertyKey[]): Complaint[] {
  const path = [...before, ...issue.path];
  if (issue.code === 'unrecognized_keys') {
    // `plainWords` writes a line for each key.
    const lines = issue.message.split('\n');
    return issue.keys.map((key, index) => ({ path, key, message: lines[index] ?? issue.message }));
  }
  if (issue.code === 'invalid_union') {
    const meant = issue.errors.find((branch) => !branch.some(isOfAnotherType));
    if (meant !== undefined) return meant.flatMap((inner) => told(inner, path));
  }
  return [{ path, message: issue.message }];
}

/** In a union, a branch for values of quite another type is not the one that was meant. */
function isOfAnotherType(issue: z.core.$ZodIssue): boolean {
  return issue.path.length === 0 && (issue.code === 'invalid_type' || issue.code === 'invalid_value');
}

/** A key that is misspelt is unknown, and its right spelling is missing: that is one mistake, told once. */
function withoutTwins(complaints: readonly Complaint[], value: unknown): Complaint[] {
  const misspelt = complaints.filter((each) => each.key !== undefined);
  return complaints.filter(({ path }) => {
    const name = path.at(-1);
    if (typeof name !== 'string' || valueAt(value, path) !== undefined) return true;
    const parent = path.slice(0, -1).join('.');
    return !misspelt.some((other) => {
      return other.path.join('.') === parent && nearest(other.key ?? '', [name]) !== undefined;
    });
  });
}

function valueAt(value: unknown, path: readonly PropertyKey[]): unknown {
  let inner = value;
  for (const part of path) {
    if (typeof inner !== 'object' || inner === null || !Object.hasOwn(inner, part)) return undefined;
    inner = (inner as Record<PropertyKey, unknown>)[part];
  }
  return inner;
}
