import type { Expression } from './expression.js';
import type { Amperes, Dimension, Ratio, Seconds, Volts, Watts } from '../quantity/quantity.js';

export type Role = 'load' | 'meter' | 'scanner' | 'thermometer' | 'source';

/** A driver file: how one family of instruments is spoken to. */
export interface Driver {
  readonly name: string;
  readonly role: Role;
  readonly summary: string;
  readonly wire: Wire;
  /** The question for the identity. */
  readonly identify: string;
  /** What the answer must look like; any answer will do when it is left out. */
  readonly identity?: Expression;
  /** The instrument's error queue, or that it has none. */
  readonly errors: 'none' | { readonly ask: string; readonly clear: Expression };
  readonly prepare: readonly string[];
  readonly release: readonly string[];
  /** Messages by operation; `{amps}` and `{volts}` stand for the value. */
  readonly operations: Readonly<Record<string, readonly string[]>>;
  readonly readings: Readonly<Record<string, DriverReading>>;
  /** How long the instrument itself needs after an operation before a reading counts. */
  readonly settling: Seconds;
  readonly ratings: {
    readonly voltage?: Volts;
    readonly current?: Amperes;
    readonly power?: Watts;
    /** Below this voltage a load can no longer sink its set current. */
    readonly leastVoltage?: Volts;
  };
  /** What the maker promises, by reading name. */
  readonly accuracy: Readonly<Record<string, Accuracy>>;
}

export interface Wire {
  readonly sendEnd: string;
  readonly replyEnd: string;
  /** Silence kept between two messages. */
  readonly gap: Seconds;
  readonly timeout: Seconds;
}

/**
 * A reading is a number with a unit, a yes or no, or the number of a scanner's channel (null where none is
 * closed). All of `ask` is sent; the last one is answered.
 */
export type DriverReading =
  | {
      readonly kind: 'number';
      readonly ask: readonly string[];
      readonly dimension: Dimension;
      readonly pattern?: Expression;
    }
  | {
      readonly kind: 'flag';
      readonly ask: readonly string[];
      readonly trueWhen: Expression;
      /** What a no looks like, where it is none of `0`, `OFF`, `FALSE` and `NO`. */
      readonly falseWhen?: Expression;
    }
  /** `channelIn` finds the number in a group named `value`; a reply without one means that none is closed. */
  | { readonly kind: 'channel'; readonly ask: readonly string[]; readonly channelIn: Expression };

/** Half-widths of the promised error: a part of the reading plus a fixed part, in the reading's unit. */
export interface Accuracy {
  readonly ofReading: Ratio;
  readonly fixed: number;
  /** The step of the last digit, where it is known. */
  readonly resolution?: number;
}

/** The operations a role must have to be of use, and those it may have. */
export const operationsOf = {
  load: {
    must: ['make-safe', 'input-on', 'input-off', 'current-mode', 'set-current'],
    may: ['voltage-mode', 'set-voltage', 'protect-current', 'protect-voltage', 'protect-power'],
  },
  // Told one after the other, as in a trial, they leave it at dc voltage.
  meter: { must: ['make-safe'], may: ['measure-resistance', 'measure-voltage'] },
  scanner: { must: ['make-safe', 'close-channel', 'open-all'], may: [] },
  thermometer: { must: [], may: [] },
  source: { must: ['make-safe', 'output-on', 'output-off'], may: ['set-voltage', 'set-current'] },
} as const satisfies Record<Role, { must: readonly string[]; may: readonly string[] }>;

export const readingsOf = {
  load: { must: ['voltage', 'current', 'input-state'], may: ['power', 'temperature'] },
  meter: {
    must: ['voltage'],
    may: ['resistance', 'temperature', 'current', 'measures-voltage', 'measures-resistance'],
  },
  scanner: { must: [], may: ['closed-channel'] },
  thermometer: { must: ['temperature'], may: [] },
  source: { must: [], may: ['voltage', 'current', 'output-state'] },
} as const satisfies Record<Role, { must: readonly string[]; may: readonly string[] }>;
