import type { Amperes, Ohms, Volts, Watts } from '../quantity/quantity.js';
import type { Driver } from './driver.js';
import type { Simulation } from './simulation-section.js';

/** A bench file: the instruments, leads and hard limits of one work place. */
export interface Bench {
  readonly name: string;
  readonly instruments: { readonly load: InstrumentPlace; readonly meter?: InstrumentPlace };
  /** There and back; used when nothing senses at the module. 0 ± 0 where the file gives none. */
  readonly leads: { readonly resistance: Ohms; readonly uncertainty: Ohms };
  readonly voltageFrom: 'meter-at-module' | 'load-terminals';
  /** Never exceeded, whatever a procedure asks. */
  readonly limits: {
    readonly voltage: Volts;
    readonly current: Amperes;
    readonly power: Watts;
  };
  /** What is really there, on a bench with simulated instruments. */
  readonly simulation?: Simulation;
}

/** The driver of each instrument of a bench. */
export interface BenchDrivers {
  readonly load: Driver;
  readonly meter?: Driver | undefined;
}

export interface InstrumentPlace {
  /** The name of a shipped driver, or a path relative to the bench file. */
  readonly driver: string;
  readonly connection: ConnectionAddress;
}

export type ConnectionAddress =
  | { readonly kind: 'tcp'; readonly host: string; readonly port: number }
  | ({ readonly kind: 'serial'; readonly path: string } & SerialSettings)
  | { readonly kind: 'replay'; readonly file: string }
  /** `simulated:` picks the dialect that understands the driver; `simulated:<dialect>` names one. */
  | { readonly kind: 'simulated'; readonly dialect?: string };

export interface SerialSettings {
  readonly baud: number;
  readonly data: 7 | 8;
  readonly parity: 'none' | 'even' | 'odd';
  readonly stop: 1 | 2;
  readonly flow: 'none' | 'hardware' | 'software';
}
