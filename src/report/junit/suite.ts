import type { Seconds } from '../../quantity/quantity.js';

/**
 * What a JUnit file can say, in the words of that format. A reader of such files stops a delivery at a failure
 * and at an error; what it makes of a skipped case is its own affair, and it is never counted as passed.
 */
export interface Suite {
  readonly name: string;
  /** ISO 8601, UTC. */
  readonly began: string;
  readonly lasted: Seconds;
  readonly properties: readonly (readonly [name: string, value: string])[];
  readonly cases: readonly Case[];
}

export interface Case {
  readonly name: string;
  /** By which readers group cases: what was under test, and by which procedure. */
  readonly group: string;
  readonly came: Came;
}

export type Came =
  | { readonly kind: 'passed'; readonly text: string }
  /** The `type` of a failure or an error is a word for programs, its message for people. */
  | { readonly kind: 'failure' | 'error'; readonly type: string; readonly message: string }
  | { readonly kind: 'skipped'; readonly text: string };
