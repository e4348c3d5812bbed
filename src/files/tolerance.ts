import type { Ratio } from '../quantity/quantity.js';

/** A tolerance file: what must have changed between two records of a module, and what must not. */
export interface Tolerance {
  readonly name: string;
  readonly title: string;
  readonly findings: readonly ToleranceEntry[];
}

export interface ToleranceEntry {
  /** The name of a finding; one that ends in `*` stands for all that begin so. */
  readonly finding: string;
  readonly expected: Expected;
}

export type Expected =
  | { readonly kind: 'within'; readonly limit: Allowed }
  | { readonly kind: 'same' }
  | { readonly kind: 'becomes'; readonly word: string };

/** How far a finding may be from what it was: a share of that, or so much in the unit of the finding. */
export type Allowed =
  { readonly kind: 'share'; readonly ratio: Ratio } | { readonly kind: 'absolute'; readonly value: number };
