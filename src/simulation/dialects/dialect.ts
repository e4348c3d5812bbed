import type { Amperes, Volts } from '../../quantity/quantity.js';
import type { LoadState } from '../virtual-load.js';

/** What a way of speaking can do with the instrument it speaks for. */
export interface LoadHands {
  readonly identity: string;
  readonly most: { readonly current: Amperes; readonly voltage: Volts };
  state(): LoadState;
  set(change: Partial<LoadState>): void;
  /** Takes one reading, which takes its time. */
  measure(what: 'voltage' | 'current' | 'power'): number;
}

export interface MeterHands {
  readonly identity: string;
  /** Volts, or ohms; infinite is beyond every range. */
  measure(what: 'voltage' | 'resistance'): number;
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
