import type { Measurement } from '../instrument/scpi-number.js';

/** One value read from one instrument. */
export interface Taken {
  readonly of: 'load' | 'meter';
  readonly what: 'voltage' | 'current';
  readonly measurement: Measurement;
}
