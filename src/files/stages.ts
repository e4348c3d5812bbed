import type { Amperes, Celsius, Ohms, Ratio, Volts, Watts } from '../quantity/quantity.js';

/** A stages file: a supply of which the modules are joined otherwise as its output rises. */
export interface Stages {
  /** In the order of the file. */
  readonly modules: readonly StagesModule[];
  readonly wish: StagesSwitching;
}

export interface StagesModule {
  readonly name: string;
  /** The folders of its records; in the file they stand relative to it. */
  readonly records: readonly string[];
}

/**
 * What the file says of the switching and of what stands behind it, in the shape in which `buildStages` takes
 * it; src/arrangement/stages-wish.ts tells what each part means.
 */
export interface StagesSwitching {
  readonly name: string;
  readonly title: string;
  readonly ballast:
    { readonly resistance: Ohms; readonly tolerance: Ratio; readonly rating: Watts | undefined } | undefined;
  readonly contacts: readonly StagesContact[];
  readonly wires: readonly Joint[];
  readonly diodes: readonly {
    readonly name: string;
    readonly from: string;
    readonly to: string;
    readonly forwardVoltage: Volts;
  }[];
  readonly arrangements: readonly {
    readonly name: string;
    readonly form: StagesForm;
    readonly driven: readonly string[];
  }[];
  readonly sequence: 'any-order' | 'break-before-make' | 'make-before-break';
  readonly linearStage: {
    readonly dropOut: Volts;
    readonly current: Amperes;
    readonly dissipation:
      | { readonly kind: 'fixed'; readonly most: Watts }
      | {
          readonly kind: 'by-case';
          readonly full: Watts;
          readonly fullTo: Celsius;
          readonly noneAt: Celsius;
          readonly case: Celsius;
        };
  };
  readonly output: { readonly from: Volts; readonly to: Volts };
  readonly hysteresis: Volts;
}

type Joint = readonly [string, string];

export type StagesContact =
  | { readonly kind: 'make' | 'break'; readonly name: string; readonly joins: Joint }
  | {
      readonly kind: 'change-over';
      readonly name: string;
      readonly common: string;
      readonly rest: string;
      readonly driven: string;
      readonly bridges: boolean;
    };

export type StagesForm =
  | { readonly kind: 'module'; readonly name: string }
  | { readonly kind: 'group' | 'stack'; readonly of: readonly StagesForm[] };
