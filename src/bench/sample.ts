import type { Post } from '../files/bench.js';
import type { Measurement } from '../instrument/scpi-number.js';

/** One value read from one instrument. */
export interface Taken {
  readonly of: Post;
  readonly what: 'voltage' | 'current' | 'temperature' | 'resistance';
  /** Where its probes were, when not at their usual place. */
  readonly at?: string;
  readonly measurement: Measurement;
}

/** What one sample shall hold besides the voltage and the current of the whole. */
export interface SampleWanted {
  /** Places at which the voltage is read too, as far as the bench can reach them by itself. */
  readonly taps?: readonly Tap[];
  /** Of the module, where the bench has a thermometer. */
  readonly temperature?: boolean;
  /** Whether what the meter reads is compared with what the load has; it is when left out. */
  readonly compared?: boolean;
}

/** A place of the circuit at which a meter's probes can be. */
export interface Tap {
  /** In the circuit, from 1. */
  readonly place: number;
  /** As readings are marked: `ballast-of-K1`. */
  readonly at: string;
}
