import type { LoadLaw } from '../circuit/load-law.js';
import type { Driver } from '../files/driver.js';
import type { SimulatedError } from '../files/simulation-section.js';
import type { Amperes, Ohms, Volts, Watts } from '../quantity/quantity.js';

/** What the load has been told. */
export interface LoadState {
  readonly input: 'on' | 'off';
  readonly mode: 'current' | 'voltage';
  readonly setCurrent: Amperes;
  readonly setVoltage: Volts;
  /** Beyond these it switches its input off. */
  readonly protection: { readonly current?: Amperes; readonly voltage?: Volts; readonly power?: Watts };
}

/** How a load wakes, and what *RST makes of it. */
export const loadAtRest: LoadState = {
  input: 'off',
  mode: 'current',
  setCurrent: 0,
  setVoltage: 0,
  protection: {},
};

/** What a load needs at its terminals when its driver does not say. */
const USUAL_LEAST_VOLTAGE: Volts = 1;

export interface LoadHardware {
  readonly leads: Ohms;
  readonly leastVoltage: Volts;
  /** What is sunk for what was set. */
  readonly setCurrent: SimulatedError;
  readonly setVoltage: SimulatedError;
}

export function loadHardware(
  driver: Driver,
  leads: Ohms,
  errors: { readonly setCurrent: SimulatedError; readonly setVoltage: SimulatedError },
): LoadHardware {
  return { leads, leastVoltage: driver.ratings.leastVoltage ?? USUAL_LEAST_VOLTAGE, ...errors };
}

/** What the module sees of the load. */
export function lawOf(load: LoadState, hardware: LoadHardware): LoadLaw {
  if (load.input === 'off') return { kind: 'open' };
  if (load.mode === 'voltage') {
    const voltage = Math.max(
      0,
      load.setVoltage * (1 + hardware.setVoltage.gain) + hardware.setVoltage.offset,
    );
    return { kind: 'voltage', voltage, leads: hardware.leads };
  }
  const current = Math.max(0, load.setCurrent * (1 + hardware.setCurrent.gain) + hardware.setCurrent.offset);
  return { kind: 'current', current, leastVoltage: hardware.leastVoltage, leads: hardware.leads };
}

/** Whether the load's own protection switches its input off at what it sees at its terminals. */
export function trips({ input, protection }: LoadState, voltage: Volts, current: Amperes): boolean {
  if (input === 'off') return false;
  return (
    current > (protection.current ?? Number.POSITIVE_INFINITY) ||
    voltage > (protection.voltage ?? Number.POSITIVE_INFINITY) ||
    voltage * current > (protection.power ?? Number.POSITIVE_INFINITY)
  );
}
