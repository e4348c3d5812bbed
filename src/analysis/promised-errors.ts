import type { RunHeader } from '../record/run-header.js';
import { type Contribution, rectangular } from '../statistics/uncertainty-budget.js';

/**
 * Standard uncertainties that an instrument's promise leaves (JCGM 100:2008, 4.3.7: half-widths taken as
 * rectangular). The gain's part is relative and common to all readings of one instrument, and so is the
 * offset; the resolution's part is each reading's own.
 */
export interface PromisedErrors {
  /** In words, for the budget: `meter voltage`. */
  readonly of: string;
  readonly gain: number;
  readonly offset: number;
  readonly resolution: number;
}

/** @param role the instrument on the bench; an instrument without a promise contributes nothing and says so nowhere: drivers must have one. */
export function promisedErrors(header: RunHeader, role: string, reading: string): PromisedErrors {
  const accuracy = header.instruments.find((instrument) => instrument.role === role)?.accuracy[reading];
  return {
    of: `${role} ${reading}`,
    gain: rectangular(accuracy?.ofReading ?? 0),
    offset: rectangular(accuracy?.fixed ?? 0),
    resolution: rectangular((accuracy?.resolution ?? 0) / 2),
  };
}

/** What stands behind the voltage at the module: the meter, or the load and the leads between. */
export interface ModuleVoltageErrors {
  readonly instrument: PromisedErrors;
  /** Standard uncertainty of the leads' resistance where it was added by calculation, in Ω. */
  readonly leads: number;
}

export function moduleVoltageErrors(header: RunHeader): ModuleVoltageErrors {
  const { voltageFrom, leads } = header.bench;
  return voltageFrom === 'meter-at-module'
    ? { instrument: promisedErrors(header, 'meter', 'voltage'), leads: 0 }
    : { instrument: promisedErrors(header, 'load', 'voltage'), leads: rectangular(leads.uncertainty) };
}

/** A line of a budget that rests on a promise, not on readings. */
export function promised(name: string, uncertainty: number): Contribution {
  return { name, kind: 'B', uncertainty: Math.abs(uncertainty), degreesOfFreedom: Number.POSITIVE_INFINITY };
}
