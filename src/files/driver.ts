import type { Amperes, Dimension, Ratio, Seconds, Volts, Watts } from '../quantity/quantity.js';
import type { SerialSettings } from './bench.js';
import type { Exchange } from './driver-dialogue.js';
import type { Expression } from './expression.js';

export type Role = 'load' | 'meter' | 'scanner' | 'thermometer' | 'source';

/** A driver file: how one family of instruments is spoken to. */
export interface Driver {
  readonly name: string;
  readonly role: Role;
  readonly summary: string;
  readonly wire: Wire;
  /** Told before anything else on a line of which nothing is known, even before what makes safe. */
  readonly remote: readonly Message[];
  /** The question for the identity. */
  readonly identify: string;
  /** What the answer must look like; any answer will do when it is left out. */
  readonly identity?: Expression;
  /** How the instrument says that something was wrong, or that it does not. */
  readonly errors: 'none' | ErrorReport;
  /** How the instrument says that it has done what it was told. */
  readonly ready?: Readiness;
  /** One of several channels must be named; `driverOfChannel` makes a driver of one of them. */
  readonly channels?: Channels;
  readonly prepare: readonly Message[];
  readonly release: readonly Message[];
  /** Told last of all, and nothing is asked after it: hands the instrument back to its front panel. */
  readonly local: readonly Message[];
  /** Messages by operation; `{amps}` and `{volts}` stand for the value. */
  readonly operations: Readonly<Record<string, readonly Message[]>>;
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
  /** What must be sent, and what answers must be taken for: how the driver is tested without an instrument. */
  readonly dialogue?: readonly Exchange[];
}

export interface Wire {
  readonly sendEnd: string;
  readonly replyEnd: string;
  /** Silence kept between two messages. */
  readonly gap: Seconds;
  readonly timeout: Seconds;
  /** The instrument repeats each message before it answers. */
  readonly echo?: boolean;
  /** What the instrument sends, without an end of line, when it will take the next message. */
  readonly prompt?: string;
  /** What a serial line is set to, where its address does not say otherwise. */
  readonly serial?: Partial<SerialSettings>;
}

/** One message, and what is due after it before anything else is sent. */
export interface Message {
  /** As it is sent, but for its placeholders and its end. */
  readonly text: string;
  /** The instrument hears nothing for so long after it. */
  readonly rest?: Seconds;
  /** `ready` is asked until it says so. */
  readonly untilReady?: true;
  /** It chooses the channel that the messages after it are for. */
  readonly selectsChannel?: true;
}

/** What to do with an error, by the text of its entry or the number of its register. */
export interface ErrorPolicy {
  /** Told as a notice and otherwise passed over. */
  readonly harmless?: Expression;
  /** What was told is told once more: it came too soon, or was garbled. */
  readonly again?: Expression;
  /** Told after any other error, so that the next one is not this one. */
  readonly afterwards: readonly Message[];
}

export type ErrorReport = ErrorPolicy &
  (
    | { readonly kind: 'queue'; readonly ask: string; readonly clear: Expression }
    /** A number, as `*ESR?` answers; there is an error where any of these bits is set. */
    | { readonly kind: 'register'; readonly ask: string; readonly bits: number }
  );

export interface Readiness {
  readonly ask: string;
  readonly when:
    | { readonly kind: 'answer'; readonly like: Expression }
    /** The answer is a number, as of `*STB?`; all of these bits must be so. */
    | { readonly kind: 'bits'; readonly bits: number; readonly are: 'set' | 'clear' };
  /** The pause before it is asked again. */
  readonly every: Seconds;
  /** How long it may take in all. */
  readonly within: Seconds;
}

export interface Channels {
  /** Told before each operation and each reading; may be empty where the messages name the channel themselves. */
  readonly select: readonly Message[];
  readonly first: number;
  readonly last: number;
}

/** A range of a meter, and how it is chosen. */
export interface Range {
  /** In the unit of the reading; larger is not read on it. */
  readonly upTo: number;
  readonly select: readonly Message[];
}

/**
 * A reading is a number with a unit, a yes or no, or the number of a scanner's channel (null where none is
 * closed). All of `ask` is sent; the last one is answered.
 */
export type DriverReading =
  | {
      readonly kind: 'number';
      readonly ask: readonly Message[];
      readonly dimension: Dimension;
      /** What the number in the reply is multiplied by to be in the unit of its dimension. */
      readonly factor: number;
      /** The part of `factor` that is not the unit's: it counts also where the reply names a unit of its own. */
      readonly scale?: number;
      /** Finds the number in a group named `value`, and its unit, where there is one, in `unit`. */
      readonly pattern?: Expression;
      /** In rising order; the smallest that holds what was read last is chosen before the next reading. */
      readonly ranges?: readonly Range[];
      /** A reading is the mean over this; those closer together are in part the same one. */
      readonly averaging?: Seconds;
    }
  | {
      readonly kind: 'flag';
      readonly ask: readonly Message[];
      readonly trueWhen: Expression;
      /** What a no looks like, where it is none of `0`, `OFF`, `FALSE` and `NO`. */
      readonly falseWhen?: Expression;
    }
  | {
      readonly kind: 'channel';
      readonly ask: readonly Message[];
      /** Finds the number in a group named `value`. */
      readonly channelIn: Expression;
      /** What the reply looks like when none is closed, where that is no empty list: `(@)`. */
      readonly noneWhen?: Expression;
    };

/** Half-widths of the promised error: a part of the reading plus a fixed part, in the reading's unit. */
export interface Accuracy {
  readonly ofReading: Ratio;
  readonly fixed: number;
  /** The step of the last digit, where it is known. */
  readonly resolution?: number;
}

/** How long after a change a reading of this instrument counts: no mean may reach back before it. */
export function settlingOf({ settling, readings }: Driver): Seconds {
  const averaging = Object.values(readings).map((each) =>
    each.kind === 'number' ? (each.averaging ?? 0) : 0,
  );
  return settling + Math.max(0, ...averaging);
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
  source: { must: ['output-state'], may: ['voltage', 'current'] },
} as const satisfies Record<Role, { must: readonly string[]; may: readonly string[] }>;
