import type * as z from '../libraries/zod.js';
import type { OpenBench } from '../bench/open-bench.js';
import type { GuardLimits, Guards } from '../bench/guards.js';
import type { EarthRelation } from '../circuit/earth-relation.js';
import type { Clock } from '../clock/clock.js';
import type { Circuit } from '../files/procedure.js';
import type { Amperes, QuantityOrShare, ReferenceName, Seconds } from '../quantity/quantity.js';
import type { JournalEvent } from '../record/journal-event.js';
import type { Operator } from './operator.js';
import type { UnderTest } from './under-test.js';

/**
 * One kind of step: what it may be told, what it needs and how it is performed. What its readings mean is
 * not its business; that is for the analysis, which sees the journal only.
 */
export interface StepKind<Parameters = unknown> {
  readonly kind: string;
  /** One line for help and for the schema. */
  readonly summary: string;
  readonly parameters: z.ZodType<Parameters>;
  /** What a later step may refer to once this one is done. */
  readonly measures: readonly ReferenceName[];
  readonly needs: {
    /** The module is connected and on, so its voltage is checked beforehand. */
    readonly liveModule: boolean;
    /** Whether it can't be done without someone who can act; a step may still ask one who is there. */
    readonly operator: 'always' | 'never';
    /** The circuits it makes sense for; any when left out. */
    readonly circuits?: readonly Circuit[];
    /** The kinds of step that must have been done before it. */
    readonly after?: readonly string[];
    /** The voltage at each place of the circuit is read; where nothing else can, the operator moves the meter. */
    readonly taps?: true;
    /** What the drivers must say how to do, by role: `{ load: ['voltage-mode', 'set-voltage'] }`. */
    readonly operations?: Readonly<Partial<Record<'load' | 'meter', readonly string[]>>>;
    /** What the drivers must say how to read, by role. */
    readonly readings?: Readonly<Partial<Record<'load' | 'meter', readonly string[]>>>;
  };
  /** Whether, told so, it asks someone to act, on top of `needs.operator`. */
  asks?(parameters: Parameters): boolean;
  /** Whether, told so, it can't be done where nothing measures the temperature. */
  needsThermometer?(parameters: Parameters): boolean;
  /** Every quantity among the parameters that may refer to another, by parameter name. */
  references(parameters: Parameters): Readonly<Record<string, QuantityOrShare>>;
  /** The parameters among `references` that are currents the load will be set to. */
  readonly currents: readonly string[];
  /** Two of `currents`, the first of which must be the lower one. */
  readonly rises?: { readonly from: string; readonly to: string; readonly mayBeLevel: boolean };
  /** A sentence for the plan: `21 points from 0 A to 100 % of rated-current`. */
  describe(parameters: Parameters): string;
  /** A rough idea of how long it takes, for the time that remains. */
  duration(parameters: Parameters, reach: Reach): Seconds;
  perform(parameters: Parameters, context: StepContext): Promise<void>;
}

/** How many modules there are, and how often a step that reads their places goes through its points. */
export interface Reach {
  readonly modules: number;
  /** Once for each place where the operator moves the meter, else 1. */
  readonly passes: number;
}

/** What a step is given to work with. */
export interface StepContext {
  readonly step: number;
  readonly bench: OpenBench;
  readonly limits: GuardLimits;
  /** Every sample passes them before anything is made of it. */
  readonly guards: Guards;
  readonly underTest: UnderTest;
  readonly journal: { append(event: JournalEvent): void };
  readonly clock: Clock;
  /** Aborted when the run must stop; looked at between questions, never inside one. */
  readonly signal: AbortSignal;
  readonly operator: Operator;
  /** The nameplate and what was measured so far. */
  readonly known: Known;
  /** What a ramp saw the module hold and drop, so that a search does not begin above it. */
  readonly tried: Tried;
  /** How each module's output stands to earth, by its name, as a check in this run found it. One that is not there was not checked. */
  readonly earths: Map<string, EarthRelation>;
  /** How often the source has cycled the modules' input in this step. */
  readonly latches: { cleared: number };
  readonly show: (progress: Progress) => void;
}

export interface Tried {
  /** The highest set-point that was held. */
  held?: Amperes;
  /** The lowest set-point that was not. */
  dropped?: Amperes;
}

export type Known = Partial<Record<ReferenceName, number>>;

/** What someone who watches wants to see of the moment. */
export interface Progress {
  readonly setCurrent?: number;
  readonly voltage?: number;
  readonly current?: number;
  readonly temperature?: number;
  readonly note?: string;
}
