import type { Amperes, Ohms, Ratio } from '../quantity/quantity.js';
import type {
  Band,
  Circuit,
  Concern,
  Estimate,
  Part,
  Recommendation,
  ResistorChosen,
  Standing,
} from './build.js';
import type { ModuleProfile } from './module-profile.js';

/** What is wished of modules in parallel. */
export interface ParallelWish {
  readonly ballast:
    | { readonly kind: 'given'; readonly resistance: Ohms }
    | { readonly kind: 'for-imbalance'; readonly most: Ratio };
  /** Of the ballast resistors: 0.05 for ± 5 %. */
  readonly tolerance: Ratio;
  /** That the group is to feed; what it is recommended for where left out. */
  readonly load: Amperes | undefined;
}

/** Modules in parallel, worked out. V, A, Ω, W. All lists of modules are in the order of `modules`. */
export interface ParallelBuild {
  readonly kind: 'parallel';
  readonly wish: ParallelWish;
  readonly modules: readonly ModuleProfile[];
  readonly standing: Standing;
  readonly concerns: readonly Concern[];
  /** At which the shares below are given. */
  readonly load: { readonly current: Amperes; readonly from: 'asked-for' | 'recommended' };
  /** `none`: the modules share well enough joined directly. `impossible`: no ballast does what is wished, and why. */
  readonly ballast:
    | ({ readonly kind: 'resistor' } & ResistorChosen)
    | { readonly kind: 'none' }
    | { readonly kind: 'impossible'; readonly why: string };
  readonly sharing: ShareBand;
  readonly atLoad: SharingAtLoad;
  /** Which module reaches its limit first as the load rises, and at which load of the group. */
  readonly firstToSaturate: {
    readonly module: string;
    readonly load: Estimate;
    /** That it is this one. */
    readonly probability: Ratio;
    /** What the group does there, a sentence. */
    readonly then: string;
  };
  readonly usable: Estimate;
  readonly recommended: Recommendation;
  /** What they could do one by one, added up: more than the group, and shown so that nobody takes it for that. */
  readonly sumOfSingles: { readonly usable: Amperes; readonly recommended: Amperes };
  readonly withoutBallast: WithoutBallast;
  /** One for each module: what happens when it fails or is switched off. */
  readonly failures: readonly ModuleLost[];
  readonly circuit: Circuit;
  readonly parts: readonly Part[];
  readonly cautions: readonly string[];
}

/** Each module's current, and the voltage of the bus, over the load of the group. */
export interface ShareBand {
  /** Rising, from near 0 to the most that the group holds. */
  readonly loads: readonly Amperes[];
  readonly busVoltage: Band;
  /** Of each module, in A. */
  readonly currents: readonly Band[];
}

export interface SharingAtLoad {
  readonly busVoltage: Estimate;
  readonly currents: readonly Estimate[];
  /** I_k / I_load. */
  readonly shares: readonly Estimate[];
  /** (I_max − I_min)/I_mean; its `high` is the worst case of all tolerances, not of 95 %. */
  readonly imbalance: Estimate;
}

/** Joined directly. */
export interface WithoutBallast {
  /** Of the imbalance: that of the build, or where they fail if that comes first. */
  readonly load: Amperes;
  readonly imbalance: Estimate;
  /** Who carries most; undefined where it can't be told. */
  readonly hog: string | undefined;
  /** The load at which the group fails as a whole. */
  readonly failsAt: Amperes;
  /** What happens on the way there, a sentence each, by the measured limit styles. */
  readonly story: readonly string[];
}

export interface ModuleLost {
  readonly module: string;
  /** What the rest may feed continuously. */
  readonly recommended: Amperes;
  /** What the rest holds. */
  readonly usable: Amperes;
  /** Whether the rest still carries the load: within its recommendation, only for a while, or not at all. */
  readonly rest: 'carries-it' | 'overloaded' | 'fails';
  /** A sentence each: switched off, and failed with its output shorted; where a diode is needed. */
  readonly sentences: readonly string[];
}
