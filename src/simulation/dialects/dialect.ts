import type { Amperes, Celsius, Volts } from '../../quantity/quantity.js';
import type { LoadState } from '../virtual-load.js';
import type { SourceState } from '../virtual-source.js';

/** What a way of speaking can do with the instrument it speaks for. */
export interface LoadHands {
  readonly identity: string;
  readonly most: { readonly current: Amperes; readonly voltage: Volts };
  state(): LoadState;
  set(change: Partial<LoadState>): void;
  /** Takes one reading, which takes its time. */
  measure(what: 'voltage' | 'current' | 'power'): number;
}

export type MeterMode = 'voltage' | 'resistance';

export interface MeterHands {
  readonly identity: string;
  /** What it is set to, by whatever it was told or by someone at its panel. */
  mode(): MeterMode;
  setMode(mode: MeterMode): void;
  /** Volts, or ohms; infinite is beyond every range. */
  measure(what: MeterMode): number;
}

export interface ScannerHands {
  readonly identity: string;
  /** As it believes them to be, in rising order. */
  closed(): readonly number[];
  close(channels: readonly number[]): void;
  open(channels: readonly number[] | 'all'): void;
}

export interface ThermometerHands {
  readonly identity: string;
  measure(): Celsius;
}

export interface SourceHands {
  readonly identity: string;
  readonly most: { readonly voltage: Volts; readonly current: Amperes };
  state(): SourceState;
  set(change: Partial<SourceState>): void;
  measure(what: 'voltage' | 'current'): number;
}

/** A way of speaking, for one role. It knows the wire's text and nothing of drivers. */
export type Dialect =
  | {
      readonly name: string;
      readonly role: 'load';
      readonly replyEnd: string;
      wake(hands: LoadHands): Interpreter;
    }
  | {
      readonly name: string;
      readonly role: 'meter';
      readonly replyEnd: string;
      wake(hands: MeterHands): Interpreter;
    }
  | {
      readonly name: string;
      readonly role: 'scanner';
      readonly replyEnd: string;
      wake(hands: ScannerHands): Interpreter;
    }
  | {
      readonly name: string;
      readonly role: 'thermometer';
      readonly replyEnd: string;
      wake(hands: ThermometerHands): Interpreter;
    }
  | {
      readonly name: string;
      readonly role: 'source';
      readonly replyEnd: string;
      wake(hands: SourceHands): Interpreter;
    };

export interface Interpreter {
  /** Acts on one message, which came without its terminator. */
  hear(message: string): Heard;
  /** More came without an end than the input buffer holds; it was thrown away. */
  overrun(): void;
}

export interface Heard {
  readonly reply: string | undefined;
  readonly understood: boolean;
}
