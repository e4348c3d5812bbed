import type { Amperes, Volts, Watts } from '../quantity/quantity.js';
import { gradeFor } from './diode-grade.js';
import type { ModuleProfile } from './module-profile.js';
import { mostCurrentOf } from './most-current.js';

/** Above what it has to carry and to block. Common practice, no published source. */
const currentReserve = 1.5;
const voltageReserve = 2;
/** Across a Schottky diode that is worked as hard as its rating lets it; common practice, from memory. */
export const orDiodeDrop: Volts = 0.5;

/** In the plus lead of a module, so that nothing flows back into it. */
export interface OrDiode {
  readonly rating: { readonly current: Amperes; readonly voltage: Volts };
  /** Of its module at the most that it gives. */
  readonly heat: Watts;
}

/** Carries the most that any of the modules gives, and blocks the highest of their voltages. */
export function orDiodeFor(profiles: readonly ModuleProfile[]): OrDiode {
  const current = Math.max(...profiles.map((profile) => mostCurrentOf(profile).current));
  const voltage = Math.max(...profiles.map(({ openCircuit }) => openCircuit.interval[1]));
  return {
    rating: { current: Math.ceil(currentReserve * current), voltage: gradeFor(voltageReserve * voltage) },
    heat: orDiodeDrop * current,
  };
}
