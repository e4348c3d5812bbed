import type { QuantityOrShare, Ratio } from '../quantity/quantity.js';

/** A procedure file: what is to be done, in order, and what is required of the result. */
export interface Procedure {
  readonly name: string;
  readonly title: string;
  readonly purpose: string;
  readonly cautions: readonly CautionName[];
  readonly steps: readonly ProcedureStep[];
  readonly criteria: readonly Criterion[];
  readonly derating: Derating;
}

/** `parameters` is what the step kind's own schema made of the file's text. */
export interface ProcedureStep {
  readonly kind: string;
  readonly parameters: unknown;
  /** Where the step stands in its file, for messages: `real-limit.yaml:7:5`. */
  readonly place: string;
}

export interface Criterion {
  readonly finding: string;
  readonly requirement: Requirement;
}

export type Requirement =
  | { readonly kind: 'at-least' | 'at-most'; readonly value: QuantityOrShare }
  | { readonly kind: 'is'; readonly word: string };

export interface Derating {
  readonly margin: Ratio;
  readonly aboveNameplate: 'never' | 'after-soak';
}

export const cautions = [
  'mains',
  'hot-surfaces',
  'stored-charge',
  'floating-outputs',
  'earth-link-removed',
] as const;
export type CautionName = (typeof cautions)[number];
