import type { Celsius, QuantityOrAnyShare, QuantityOrShare, Ratio, Watts } from '../quantity/quantity.js';

/** A procedure file: what is to be done, in order, and what is required of the result. */
export interface Procedure {
  readonly name: string;
  readonly title: string;
  readonly purpose: string;
  readonly circuit: Circuit;
  /** How the bench is wired for it, an instruction a line. */
  readonly wiring: readonly string[];
  readonly cautions: readonly CautionName[];
  readonly limits: ProcedureLimits;
  readonly steps: readonly ProcedureStep[];
  readonly criteria: readonly Criterion[];
  /** How far the findings may be from those of a baseline, where one is given: a shipped name or a path. */
  readonly tolerance?: string;
  readonly derating: Derating;
}

/**
 * What the procedure itself never exceeds, on top of what the bench allows. A share is one of the nameplate.
 */
export interface ProcedureLimits {
  readonly voltage?: QuantityOrShare;
  readonly current?: QuantityOrShare;
  readonly power?: Watts;
  readonly temperature?: Celsius;
}

/** How the modules under test are wired: one alone, a parallel group, or a stack. */
export const circuits = ['single', 'parallel', 'series'] as const;
export type Circuit = (typeof circuits)[number];

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
  | { readonly kind: 'at-least' | 'at-most'; readonly value: QuantityOrAnyShare }
  | { readonly kind: 'is'; readonly word: string };

export interface Derating {
  readonly margin: Ratio;
  readonly aboveNameplate: 'never' | 'after-soak';
  readonly ambient?: AmbientLine;
  /** `fixed`: the share of the losses at the soaked current that no load changes. */
  readonly lossModel?: { readonly fixed: Ratio };
  /** Of the place where a soak measures. */
  readonly temperatureLimit?: Celsius;
}

/** Full load up to `fullTo`, then a straight line down to `fallingTo` at `at`, nothing beyond. */
export interface AmbientLine {
  readonly expected: Celsius;
  readonly fullTo: Celsius;
  readonly fallingTo: Ratio;
  readonly at: Celsius;
}

export const cautions = [
  'mains',
  'hot-surfaces',
  'stored-charge',
  'floating-outputs',
  'earth-link-removed',
] as const;
export type CautionName = (typeof cautions)[number];
