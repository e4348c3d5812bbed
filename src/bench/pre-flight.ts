import { formatQuantity } from '../quantity/format-quantity.js';
import type { Volts } from '../quantity/quantity.js';
import { PreFlightError } from './bench-error.js';
import { moduleVoltage } from './module-voltage.js';
import type { OpenBench } from './open-bench.js';

/** @throws PreFlightError when the load's input is on before the run has begun. */
export async function checkInputIsOff(bench: OpenBench): Promise<void> {
  if (!(await bench.load.isOn())) return;
  throw new PreFlightError(
    `the input of the load at ${bench.load.address} is on`,
    'is somebody else using it? It is switched off on the way out; begin again when that is clear',
  );
}

/** Part of the rated voltage by which the open-circuit voltage may differ before it is another module. */
const tolerance = 0.25;
/** Below this part of the rated voltage there is nothing there. */
const nothing = 0.05;

/**
 * Reads the open-circuit voltage with the input off, and hands it over when it is one that this module may
 * have.
 * @throws PreFlightError when it has the wrong sign or a size that this module can't have.
 */
export async function checkOpenCircuitVoltage(bench: OpenBench, rated: Volts): Promise<Volts> {
  const taken = await bench.sample(() => undefined);
  const volts = moduleVoltage(bench, taken);
  if (Number.isNaN(volts)) {
    throw new PreFlightError(
      'the voltage of the module could not be read',
      `check the range and the leads of the ${bench.description.voltageFrom === 'meter-at-module' ? 'meter' : 'load'}`,
    );
  }
  const read = formatQuantity(volts, 'voltage', { significant: 4 });
  if (volts < -rated * nothing) {
    throw new PreFlightError(
      `the module reads ${read}`,
      'the polarity is reversed: swap the leads at the module',
    );
  }
  if (volts < rated * nothing) {
    throw new PreFlightError(
      `the module reads ${read}`,
      'is it plugged in and switched on, are the leads in place?',
    );
  }
  if (Math.abs(volts - rated) > rated * tolerance) {
    throw new PreFlightError(
      `the module reads ${read} and its nameplate says ${formatQuantity(rated, 'voltage')}`,
      'is this the right module file? Is the right module connected?',
    );
  }
  return volts;
}
