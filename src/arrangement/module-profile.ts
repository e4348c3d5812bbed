import type { EarthRelation } from '../circuit/earth-relation.js';
import type { Nameplate } from '../circuit/nameplate.js';
import type { Amperes, Volts } from '../quantity/quantity.js';
import type { Contribution } from '../statistics/uncertainty-budget.js';
import type { Concern } from './build.js';
import type { RecordSource } from './understood-record.js';

/** What the records say of one module, as far as something can be built on it. V, A, Ω. */
export interface ModuleProfile {
  readonly name: string;
  readonly description: string;
  /** By the newest of its records. */
  readonly label: Nameplate;
  readonly protectionClass: 'I' | 'II';
  /** What feeds it. No record shows whether its output is cut off from a DC input. */
  readonly input: 'mains' | 'dc';
  /** What its output withstands to earth. */
  readonly outputIsolation: 'unknown' | Volts;
  readonly openCircuit: Taken;
  /** Of the regulated line, 0 at least. */
  readonly droop: Taken;
  /** The most that it gives within its sag, steadily; `bound: 'least'` where no limit was met. */
  readonly usable: Taken;
  /** For continuous use; the lowest that any of its records recommends. */
  readonly recommended: { readonly current: Amperes; readonly why: string; readonly from: RecordSource };
  /** Where it drops out; undefined where no record went so far. */
  readonly dropout: Taken | undefined;
  /** Into a short circuit; undefined where no record measured it. */
  readonly shortCircuit: Taken | undefined;
  /** What it does past its limit; undefined where it was not measured or could not be told. */
  readonly limitStyle: { readonly word: LimitStyle; readonly from: RecordSource } | undefined;
  /** How its output stands to earth; undefined where no record measured it. */
  readonly earth: { readonly relation: EarthRelation; readonly from: RecordSource } | undefined;
  /** What weakens or hinders whatever is built on these records. */
  readonly concerns: readonly Concern[];
}

export type LimitStyle = 'constant-current' | 'foldback' | 'constant-power' | 'hiccup' | 'latch-off';

/** A measured number taken over from a record. */
export interface Taken {
  readonly value: number;
  /** 95 %. */
  readonly interval: readonly [low: number, high: number];
  readonly bound?: 'least';
  readonly budget: readonly TakenContribution[];
  readonly from: RecordSource;
  readonly note: string;
}

/**
 * A line of the budget, and whether it is an error that other modules' numbers have as well: two lines with
 * the same `shared` are one and the same error, and move both numbers the same way.
 */
export interface TakenContribution extends Contribution {
  readonly shared: string | undefined;
}
