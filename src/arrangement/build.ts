import type { Amperes, Ohms, Ratio, Volts, Watts } from '../quantity/quantity.js';

/** A number that was worked out, and the interval that holds it with 95 %. */
export interface Estimate {
  readonly value: number;
  readonly low: number;
  readonly high: number;
  /** Set where nothing showed that it is not more. */
  readonly bound?: 'least';
}

/** A line over the places of a chart, with the limits between which it lies with 95 % at each place. */
export interface Band {
  readonly best: readonly number[];
  readonly low: readonly number[];
  readonly high: readonly number[];
}

/** May it be built? Where not, or where it can't be told, why, a sentence each. */
export type Standing =
  | { readonly kind: 'may-be-built' }
  | { readonly kind: 'must-not-be-built'; readonly because: readonly string[] }
  | { readonly kind: 'cannot-tell'; readonly because: readonly string[] };

/** Something about the records that a builder must know. */
export interface Concern {
  readonly kind:
    /** Measured long ago. */
    | 'old'
    /** Measured in the future, by its own clock. */
    | 'dated-ahead'
    /** A later record tells of a change to the module. */
    | 'changed-since'
    /** The uncertainty is too large for what is asked. */
    | 'coarse'
    /** The record ends without an end, or was stopped. */
    | 'cut-off'
    /** The limit was not reached, so it is not known. */
    | 'limit-unknown'
    /** What it does past its limit is not known. */
    | 'style-unknown'
    /** Measured cold: no soak showed what it does when warm. */
    | 'not-warmed'
    /** Nobody knows what its output withstands to earth. */
    | 'isolation-unknown'
    /** It did not conform, it failed, or it is off its label. */
    | 'not-accepted'
    /** Its records describe it in different words, or disagree on its earth: perhaps two modules go by one name. */
    | 'described-otherwise'
    /** What it is put into is recommended for hardly more with it than without it. */
    | 'of-little-use'
    /** From a simulated bench: for practice only. */
    | 'simulated';
  readonly module: string;
  readonly run: string | undefined;
  /** `hinders`: nothing can be decided on it. `weakens`: to be known and weighed. */
  readonly weight: 'hinders' | 'weakens';
  /** A sentence without its full stop, that reads after `K1: `; says what to do about it. */
  readonly text: string;
}

/** How modules are joined: side by side (group) or one upon the other (stack), the lowest first. */
export type Form =
  | { readonly kind: 'module'; readonly name: string }
  | { readonly kind: 'group'; readonly of: readonly Form[] }
  | { readonly kind: 'stack'; readonly of: readonly Form[] };

/** The names of a form's modules, in its order. */
export function modulesOf(form: Form): readonly string[] {
  return form.kind === 'module' ? [form.name] : form.of.flatMap(modulesOf);
}

/** What is drawn: the form and what stands beside each module. */
export interface Circuit {
  readonly form: Form;
  /** In series with each module's output; undefined for none. */
  readonly ballast: { readonly resistance: Ohms; readonly tolerance: Ratio } | undefined;
  /** Across each module's output, against reversal. */
  readonly reverseDiodes: boolean;
  /** In series with each module's output, so that nothing flows back into it. */
  readonly orDiodes: boolean;
}

/** A line of the parts list. */
export interface Part {
  /** As in the diagram: `R1`, `D1`; modules by their names. */
  readonly marks: readonly string[];
  readonly what: string;
  /** Each a few words: `at least 3 W`, `60 V reverse`. */
  readonly ratings: readonly string[];
  /** Why it is there and what its ratings rest on. */
  readonly why: string;
}

/** For continuous use, and what sets it in a few words. */
export interface Recommendation {
  readonly current: Amperes;
  readonly setBy: string;
}

/** A resistor as it is bought and what it has to bear. */
export interface ResistorChosen {
  readonly resistance: Ohms;
  readonly tolerance: Ratio;
  /** The most it turns into heat in use, … */
  readonly dissipation: Watts;
  /** … and with its module at its limit. */
  readonly dissipationAtLimit: Watts;
  /** What to buy, reserve included; undefined where no usual resistor does. */
  readonly rating: Watts | undefined;
  /** Across it at full load. */
  readonly voltageCost: Volts;
}
