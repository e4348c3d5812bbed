import type { Bench, BenchDrivers } from '../files/bench.js';
import type { Driver } from '../files/driver.js';
import type { Amperes, Ratio, Volts } from '../quantity/quantity.js';

/** How far the readings of a bench can be trusted: what a guard must allow before it calls one impossible. */
export interface Trust {
  /** The nameplate's, of the whole. */
  readonly ratedVoltage: Volts;
  readonly leads: Bench['leads'];
  readonly meterAtModule: boolean;
  readonly load: Driver;
  readonly meter: Driver | undefined;
  /** Below it the load can't sink its set current. */
  readonly leastVoltage: Volts;
  /** What the load may read where nothing flows. */
  readonly zero: Amperes;
}

/** What a load needs at its terminals when its driver does not say. */
const usualLeastVoltage: Volts = 1;
/** On top of what is promised, for a driver that is written for a whole family: at least so much, or so much of the rated current. */
const zeroBesides: Amperes = 0.05;
const zeroOfRated: Ratio = 0.0025;

export function trustIn(bench: Bench, { load, meter }: BenchDrivers, ratedVoltage: Volts): Trust {
  const besides = Math.max(zeroBesides, zeroOfRated * (load.ratings.current ?? 0));
  return {
    ratedVoltage,
    leads: bench.leads,
    meterAtModule: bench.voltageFrom === 'meter-at-module',
    load,
    meter,
    leastVoltage: load.ratings.leastVoltage ?? usualLeastVoltage,
    zero: besides + promisedError(load, 'current', 0),
  };
}

/** Half-width of what the instrument's maker promises, and a last digit; nothing where the driver does not say. */
export function promisedError(driver: Driver | undefined, reading: string, value: number): number {
  const { ofReading = 0, fixed = 0, resolution = 0 } = driver?.accuracy[reading] ?? {};
  return ofReading * Math.abs(value) + fixed + resolution;
}
