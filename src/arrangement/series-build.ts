import type { Amperes, Volts, Watts } from '../quantity/quantity.js';
import type { Band, Circuit, Concern, Estimate, Part, Recommendation, Standing } from './build.js';
import type { ModuleProfile } from './module-profile.js';

export interface SeriesWish {
  /** That the string is to feed; what it is recommended for where left out. */
  readonly load: Amperes | undefined;
}

/** Modules in series, worked out, the lowest first. V, A. */
export interface SeriesBuild {
  readonly kind: 'series';
  readonly wish: SeriesWish;
  readonly modules: readonly ModuleProfile[];
  readonly standing: Standing;
  readonly concerns: readonly Concern[];
  readonly load: { readonly current: Amperes; readonly from: 'asked-for' | 'recommended' };
  readonly openVoltage: Estimate;
  readonly voltageAtLoad: Estimate;
  /** That of the weakest. */
  readonly usable: Estimate;
  readonly recommended: Recommendation;
  /** `sure`: with 95 % it is this one. `then`: what the string does when more is asked, a sentence. */
  readonly weakest: { readonly module: string; readonly sure: boolean; readonly then: string };
  readonly rails: readonly Rail[];
  /** Whether anything on it can be above 60 V DC (ES1 of IEC 62368-1), no load. */
  readonly beyondTouchable: boolean;
  readonly diodes: readonly ReverseDiode[];
  readonly bonds: readonly BondCase[];
  readonly curve: { readonly currents: readonly Amperes[]; readonly voltage: Band };
  readonly circuit: Circuit;
  readonly parts: readonly Part[];
  readonly cautions: readonly string[];
}

/** A module's output in the string, no load. */
export interface Rail {
  readonly module: string;
  /** Its 0 V above that of the string, … */
  readonly float: Estimate;
  /** … and its upper end. */
  readonly top: Estimate;
  readonly isolation: 'unknown' | Volts;
  /** Whether its isolation to earth bears that, the string's 0 V being earthed. */
  readonly verdict: 'within' | 'beyond' | 'unknown' | 'not-needed';
}

/** Across a module's output, for the day on which it fails while the others push. */
export interface ReverseDiode {
  readonly module: string;
  /** The most that the rest can push through it. */
  readonly current: Amperes;
  /** Set where no record shows that the rest can't push more. */
  readonly bound?: 'least';
  /** Of the rest of the string, no load, at its highest. */
  readonly voltage: Volts;
  /** While the current flows. */
  readonly heat: Watts;
  /** What to buy, reserve included. */
  readonly rating: { readonly current: Amperes; readonly voltage: Volts };
}

/** What a bond from a module's 0 V to earth would do, the string's 0 V being earthed too. */
export interface BondCase {
  readonly module: string;
  /** The modules that would be shorted; none for the lowest, whose 0 V is the string's. */
  readonly shorts: readonly string[];
  readonly volts: Volts;
  readonly sentence: string;
}
