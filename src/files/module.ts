import type { Amperes, Celsius, Volts } from '../quantity/quantity.js';

/** A module file: the supply under test, as far as its label and its owner know it. */
export interface Module {
  readonly name: string;
  readonly description: string;
  readonly rated: { readonly voltage: Volts; readonly current: Amperes; readonly ambient?: Celsius };
  /** IEC 61140. */
  readonly protectionClass: 'I' | 'II';
  readonly input: 'mains' | 'dc';
  readonly outputIsolation: 'unknown' | Volts;
  /** What was done to it, oldest first; dates as YYYY-MM-DD. */
  readonly changes: readonly { readonly date: string; readonly what: string }[];
}
