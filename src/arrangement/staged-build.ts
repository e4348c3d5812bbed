import type { Amperes, Volts, Watts } from '../quantity/quantity.js';
import type { Circuit, Concern, Estimate, Part, Standing } from './build.js';
import type { ModuleProfile } from './module-profile.js';
import type { Sequence, StagesWish } from './stages-wish.js';

/** A staged supply, worked out. V, A, W. */
export interface StagedBuild {
  readonly kind: 'stages';
  readonly wish: StagesWish;
  readonly modules: readonly ModuleProfile[];
  readonly standing: Standing;
  readonly concerns: readonly Concern[];
  /** By rising voltage. */
  readonly arrangements: readonly FoundArrangement[];
  /** From each arrangement to the next higher one, and back. */
  readonly switchOvers: readonly SwitchOver[];
  /** What the linear stage may turn into heat. */
  readonly mostDissipation: Watts;
  /** Over the output range, both ends included, rising. */
  readonly guaranteed: readonly GuaranteedPoint[];
  readonly map: DissipationMap;
  readonly parts: readonly Part[];
  readonly cautions: readonly string[];
}

export interface FoundArrangement {
  readonly name: string;
  readonly circuit: Circuit;
  /** The contacts that are closed, change-over contacts with the side they are on. */
  readonly closed: readonly string[];
  readonly openVoltage: Estimate;
  /** At its full current. */
  readonly fullVoltage: Estimate;
  /** Of the modules, continuously: what the arrangement can feed, and what sets it. */
  readonly current: Amperes;
  readonly setBy: string;
}

export interface SwitchOver {
  readonly lower: string;
  readonly upper: string;
  /** Output voltage at which it goes up, … */
  readonly up: Volts;
  /** … and at which it comes back. */
  readonly down: Volts;
  /** By how much the input of the linear stage jumps, at no load and at full load. */
  readonly swing: { readonly noLoad: Volts; readonly fullLoad: Volts };
  readonly goingUp: Movement;
  readonly comingDown: Movement;
}

/** The contacts of one change, moving at different times. */
export interface Movement {
  readonly moving: readonly string[];
  /** By how the contacts are driven; that of the wish decides. */
  readonly bySequence: Readonly<Record<Sequence, MovementVerdict>>;
  /** What the input of the linear stage stands at, at least, in the highest of the states that are passed. */
  readonly lifts?: Readonly<Record<Sequence, Volts>>;
}

export type MovementVerdict =
  /** No state that any order passes through is forbidden. */
  | {
      readonly kind: 'clear';
      readonly states: number;
      /** Whether the linear stage is without any feed in some state. */
      readonly interrupts: boolean;
    }
  | {
      readonly kind: 'forbidden';
      /** What moves, one after the other, until it is so: `S2 opens`. */
      readonly order: readonly string[];
      readonly connection: ForbiddenConnection;
    };

/** A closed loop of unequal voltages. */
export interface ForbiddenConnection {
  /** `short`: an output across itself. `unequal`: outputs of different voltage side by side. `reversed`: against each other. */
  readonly kind: 'short' | 'unequal' | 'reversed';
  readonly modules: readonly string[];
  /** That drives the current round the loop. */
  readonly volts: Volts;
  /** The contacts it goes through. */
  readonly through: readonly string[];
  readonly sentence: string;
}

export interface GuaranteedPoint {
  readonly output: Volts;
  /** Coming from below, and from above; within a hysteresis they differ. */
  readonly rising: Guaranteed;
  readonly falling: Guaranteed;
}

export interface Guaranteed {
  readonly arrangement: string;
  readonly current: Amperes;
  readonly setBy: 'module' | 'ballast' | 'dissipation' | 'drop-out' | 'linear-stage';
}

/** What the linear stage turns into heat at each output voltage (rising output) and current, at worst. */
export interface DissipationMap {
  readonly outputs: readonly Volts[];
  readonly currents: readonly Amperes[];
  /** By output, then by current; null beyond what is guaranteed. */
  readonly watts: readonly (readonly (Watts | null)[])[];
}
