import type { SimulatedModule } from '../files/simulation-section.js';
import type { Amperes, Kelvins, Ratio, Seconds, Volts } from '../quantity/quantity.js';
import { limitFactor } from './warming.js';

/**
 * A control loop that loses its margin near the limit oscillates slowly enough for a meter to follow: not a
 * multiple of the mains, so that no aperture hides it.
 */
const OSCILLATION_FREQUENCY = 23;
/**
 * Amplitude as a share of the open-circuit voltage, from the onset to the limit. A few per cent, as seen on
 * real modules, and below the usual sag of 5 %, so that an oscillation is not mistaken for a dropout.
 */
const AMPLITUDE_AT_ONSET: Ratio = 0.01;
const AMPLITUDE_AT_LIMIT: Ratio = 0.03;

/** The current from which a module oscillates, at a rise; warming moves it as it moves the limit. */
export function unsteadyAboveOf(module: SimulatedModule, rise: Kelvins): Amperes | undefined {
  return module.unsteadyAbove === undefined ? undefined : module.unsteadyAbove * limitFactor(module, rise);
}

/** What the oscillation adds to the output of a module that is delivering this current. */
export function rippleOf(module: SimulatedModule, rise: Kelvins, current: Amperes, at: Seconds): Volts {
  const onset = unsteadyAboveOf(module, rise);
  const limit = module.limit.current * limitFactor(module, rise);
  if (onset === undefined || current < onset || current > limit) return 0;
  const share = limit > onset ? (current - onset) / (limit - onset) : 1;
  const amplitude = AMPLITUDE_AT_ONSET + (AMPLITUDE_AT_LIMIT - AMPLITUDE_AT_ONSET) * share;
  return amplitude * module.openCircuitVoltage * Math.sin(2 * Math.PI * OSCILLATION_FREQUENCY * at);
}
