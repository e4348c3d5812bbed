import type { Amperes, Celsius, Ohms, Ratio, Volts, Watts } from '../quantity/quantity.js';
import type { Form } from './build.js';

/** A staged supply as its builder describes it: the switching, the linear stage behind it, the output. */
export interface StagesWish {
  readonly name: string;
  readonly title: string;
  /** In series with each module's output. */
  readonly ballast:
    { readonly resistance: Ohms; readonly tolerance: Ratio; readonly rating: Watts | undefined } | undefined;
  readonly contacts: readonly Contact[];
  /** Joined for good. */
  readonly wires: readonly Joint[];
  readonly diodes: readonly SteeringDiode[];
  readonly arrangements: readonly WishedArrangement[];
  /** How the contacts are driven from one arrangement to the next. */
  readonly sequence: Sequence;
  readonly linearStage: LinearStage;
  readonly output: { readonly from: Volts; readonly to: Volts };
  /** By how much lower the output must be before it is switched back. */
  readonly hysteresis: Volts;
}

/**
 * A node of the switching: `K1+` and `K1-` are a module's output (its plus behind its ballast), `in+` and
 * `in-` the input of the linear stage; all other names are the builder's own.
 */
export type Node = string;
export type Joint = readonly [Node, Node];

export type Contact =
  /** Closed when driven. */
  | { readonly kind: 'make'; readonly name: string; readonly joins: Joint }
  /** Open when driven. */
  | { readonly kind: 'break'; readonly name: string; readonly joins: Joint }
  /**
   * A change-over contact: `common` on `rest`, and on `driven` when driven. In between it touches neither, or
   * both where it bridges (make before break).
   */
  | {
      readonly kind: 'change-over';
      readonly name: string;
      readonly common: Node;
      readonly rest: Node;
      readonly driven: Node;
      readonly bridges: boolean;
    };

/** Conducts from `from` to `to` only. */
export interface SteeringDiode {
  readonly name: string;
  readonly from: Node;
  readonly to: Node;
  readonly forwardVoltage: Volts;
}

export interface WishedArrangement {
  readonly name: string;
  /** What it is meant to be; that the contacts make just this is checked. */
  readonly form: Form;
  /** The contacts that are driven; all others are at rest. */
  readonly driven: readonly string[];
}

export const sequences = ['any-order', 'break-before-make', 'make-before-break'] as const;
export type Sequence = (typeof sequences)[number];

export interface LinearStage {
  /** The least from input to output at which it still regulates. */
  readonly dropOut: Volts;
  readonly current: Amperes;
  readonly dissipation:
    | { readonly kind: 'fixed'; readonly most: Watts }
    /** Full up to a case temperature, falling on a straight line to nothing at another. */
    | {
        readonly kind: 'by-case';
        readonly full: Watts;
        readonly fullTo: Celsius;
        readonly noneAt: Celsius;
        /** The warmest that the case gets in use. */
        readonly case: Celsius;
      };
}
