import type { Amperes, Celsius, Kelvins, Ohms, Ratio, Seconds, Volts } from '../quantity/quantity.js';

/** What is really there, on a bench with simulated instruments. */
export interface Simulation {
  readonly seed: number;
  readonly circuit: 'single' | 'parallel' | 'series';
  /** Module (or group) to load terminals, there and back. */
  readonly leads: Ohms;
  readonly modules: readonly SimulatedModule[];
  /** Each instrument's own errors; those left out are drawn from the seed within the driver's accuracy. */
  readonly instruments: Readonly<Record<string, SimulatedInstrument>>;
  /** What the simulated operator answers to an `operator` step, by the step's name. */
  readonly answers: Readonly<Record<string, string>>;
  readonly faults: readonly SimulatedFault[];
}

export interface SimulatedModule {
  readonly name: string;
  readonly openCircuitVoltage: Volts;
  readonly droopResistance: Ohms;
  readonly limit: ModuleLimit;
  /** Oscillates from here to the limit. */
  readonly unsteadyAbove?: Amperes;
  /** Standard deviation of the output's own noise, as a meter's reading sees it. */
  readonly noise: Volts;
  /** In series with it, in a group or a stack. */
  readonly ballast: Ohms;
  /** Series only. */
  readonly reverseDiode: boolean;
  readonly earth: 'bonded' | 'isolated' | Ohms;
  /** For the heating: at this current the rise is `rise-at-rated`. Three quarters of the limit when left out. */
  readonly ratedCurrent?: Amperes;
  readonly thermal?: {
    readonly riseAtRated: Kelvins;
    readonly timeConstant: Seconds;
    readonly ambient: Celsius;
    /** Relative change of the limit for each kelvin of rise. */
    readonly limitPerKelvin: Ratio;
  };
}

export type ModuleLimit =
  | { readonly style: 'constant-current'; readonly current: Amperes }
  /** Folds back along a straight line to `shortCircuit` at 0 V. */
  | { readonly style: 'foldback'; readonly current: Amperes; readonly shortCircuit: Amperes }
  | { readonly style: 'constant-power'; readonly current: Amperes }
  /** Tries to start once each period. */
  | { readonly style: 'hiccup'; readonly current: Amperes; readonly period: Seconds }
  /** Off until its input is cycled. */
  | { readonly style: 'latch-off'; readonly current: Amperes };

export interface SimulatedInstrument {
  /** By reading name: the errors this one really has. */
  readonly errors: Readonly<Record<string, SimulatedError>>;
  /** How long it takes over one reading. */
  readonly readingTime?: Seconds;
}

export interface SimulatedError {
  /** Relative error of the reading. */
  readonly gain: Ratio;
  readonly offset: number;
  readonly resolution: number;
}

export type FaultName =
  /** It neither answers nor obeys; or its connection drops and can't be opened. */
  | `${'load' | 'meter' | 'scanner' | 'thermometer' | 'source'}-${'silent' | 'lost'}`
  /** Its power goes and comes again: lost for as long, and it has forgotten all that it was told. */
  | `${'load' | 'meter' | 'scanner' | 'thermometer' | 'source'}-restarted`
  /** Answers each question for a reading with what it last answered to it, whatever is there. */
  | `${'load' | 'meter'}-stuck`
  | 'module-dead'
  /** The load's and the meter's leads, swapped at the module. */
  | 'reversed'
  /** The channel that is closed, or the next one to be, stays closed whatever the scanner is told. */
  | 'scanner-stuck'
  /** The same, and the scanner says that it has closed what it was told to close. */
  | 'scanner-stuck-unnoticed'
  /** Someone has set the meter to resistance at its panel; it stays so until it is told otherwise. */
  | 'meter-wrong-mode'
  /** The probes across a place's ballast or output, swapped. */
  | 'probes-reversed'
  /** One of a meter's own leads is broken: it reads nothing, and an open circuit in resistance. */
  | 'lead-broken';

export interface SimulatedFault {
  readonly at: Seconds;
  readonly what: FaultName;
  /** How long it lasts, where it passes: of what is silent, lost or restarted. For good when left out. */
  readonly for?: Seconds;
  /** The module it happens to, or whose own meter; the first, or every one of them, when left out. */
  readonly of?: string;
}
