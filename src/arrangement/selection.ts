import type { Amperes, Ohms, Ratio } from '../quantity/quantity.js';
import type { Circuit, Concern, Part, Standing } from './build.js';
import type { ModuleProfile } from './module-profile.js';
import type { ParallelWish } from './parallel-build.js';

/** So many alike supplies out of one drawer: each a stack of groups. */
export interface SelectionWish {
  /** Modules side by side in each place of a stack, 1 at least. */
  readonly group: number;
  /** Groups one upon the other, 1 at least. */
  readonly stack: number;
  /** Supplies, 1 at least. */
  readonly supplies: number;
  readonly ballast: ParallelWish['ballast'];
  readonly tolerance: Ratio;
}

/** The best assignment, and by how much. */
export interface Selection {
  readonly kind: 'selection';
  readonly wish: SelectionWish;
  /** All that could be considered. */
  readonly modules: readonly ModuleProfile[];
  readonly leftOut: readonly { readonly module: string; readonly why: string }[];
  readonly standing: Standing;
  readonly concerns: readonly Concern[];
  /** Undefined where the drawer does not hold enough. */
  readonly best: Assignment | undefined;
  /** The best one that pairs modules otherwise; undefined where there is no other. */
  readonly next: Assignment | undefined;
  /** What the best is ahead by, and whether that is more than the records can tell; a sentence. */
  readonly margin:
    | {
        readonly current: Amperes;
        readonly imbalance: Ratio;
        readonly told: boolean;
        readonly sentence: string;
      }
    | undefined;
  /** How many assignments there are. */
  readonly considered: number;
  readonly unused: readonly string[];
  /** Of the first supply of the best, as which the others are wired; undefined where there is none. */
  readonly circuit: Circuit | undefined;
  /** Of all supplies of the best, in their order; the marks go on from one to the next. */
  readonly parts: readonly Part[];
  readonly cautions: readonly string[];
}

export interface Assignment {
  readonly supplies: readonly SelectedSupply[];
  /** Of the weakest of the supplies, continuously. */
  readonly recommended: Amperes;
  /** Of the worst group, at its recommended current. */
  readonly imbalance: Ratio;
  /** In series with each module; undefined for none. */
  readonly ballast: Ohms | undefined;
}

export interface SelectedSupply {
  /** The lowest first. */
  readonly groups: readonly {
    readonly modules: readonly string[];
    readonly recommended: Amperes;
    readonly imbalance: Ratio;
  }[];
  readonly recommended: Amperes;
}
