import { formatQuantity } from '../quantity/format-quantity.js';
import type { Volts } from '../quantity/quantity.js';
import { PreFlightError } from './bench-error.js';
import { offNameplate } from './ceilings.js';
import { valueOf } from './guards.js';
import { checkMeasuresVoltage } from './meter-mode.js';
import { moduleVoltage } from './module-voltage.js';
import type { OpenBench } from './open-bench.js';
import type { Taken } from './sample.js';

/** @throws PreFlightError when the load's input, or the source's output, is on before the run has begun. */
export async function checkAllIsOff({ load, source }: OpenBench): Promise<void> {
  const advice =
    'is somebody else using it? It is switched off on the way out; begin again when that is clear';
  if (await load.isOn()) throw new PreFlightError(`the input of the load at ${load.address} is on`, advice);
  if (source !== undefined && (await source.isOn())) {
    throw new PreFlightError(`the output of the source at ${source.address} is on`, advice);
  }
}

/**
 * Asks every meter that can be asked whether it measures dc voltage.
 * @throws WrongPlaceError naming the one that does not.
 */
export async function checkMeters({ instruments }: Pick<OpenBench, 'instruments'>): Promise<void> {
  for (const { instrument } of instruments) {
    if (instrument.role === 'meter') await checkMeasuresVoltage(instrument);
  }
}

/** The module is fed by then, where a source feeds it. */
export function whenLookedAt({ source }: Pick<OpenBench, 'source'>): string {
  return `before ${source === undefined ? 'anything' : 'the load'} was switched on`;
}

/** Below this part of the rated voltage there is nothing there. */
const nothing = 0.05;

/**
 * Reads the open-circuit voltage with the input off, and hands it over when it is one that this module may
 * have.
 * @throws PreFlightError when it has the wrong sign or a size that this module can't have, or when the meter
 * at the module and the load do not read the same.
 */
export async function checkOpenCircuitVoltage(bench: OpenBench, rated: Volts): Promise<Volts> {
  const taken = await bench.sample(() => undefined, { compared: false });
  const volts = moduleVoltage(bench, taken);
  const wrong = (what: string, advice: string): PreFlightError =>
    new PreFlightError(what, advice, whenLookedAt(bench));
  if (Number.isNaN(volts)) {
    throw wrong(
      'the voltage of the module could not be read',
      `check the range and the leads of the ${bench.description.voltageFrom === 'meter-at-module' ? 'meter' : 'load'}`,
    );
  }
  checkAgreement(bench, taken, rated);
  const read = formatQuantity(volts, 'voltage', { significant: 4 });
  if (volts < -rated * nothing) {
    throw wrong(`the module reads ${read}`, 'the polarity is reversed: swap the leads at the module');
  }
  if (volts < rated * nothing) {
    throw wrong(`the module reads ${read}`, 'is it plugged in and switched on, are the leads in place?');
  }
  if (Math.abs(volts - rated) > rated * offNameplate) {
    throw wrong(
      `the module reads ${read} and its nameplate says ${formatQuantity(rated, 'voltage')}`,
      'is this the right module file? Is the right module connected?',
    );
  }
  return volts;
}

/** Part of the rated voltage by which meter and load may differ beyond what both promise. */
const disagreement = 0.02;

/**
 * With the input off nothing is lost in the leads, so the meter at the module and the load read the same; a
 * meter that does not is at another place, or measures something else, whatever it says.
 */
function checkAgreement(bench: OpenBench, taken: readonly Taken[], rated: Volts): void {
  if (bench.description.voltageFrom !== 'meter-at-module') return;
  const metered = valueOf(taken, 'meter', 'voltage');
  const atLoad = valueOf(taken, 'load', 'voltage');
  const allowed =
    promised(bench.meter, metered) + promised(bench.load.instrument, atLoad) + disagreement * rated;
  if (!(Math.abs(metered - atLoad) > allowed)) return;
  const read = (volts: Volts): string => formatQuantity(volts, 'voltage', { significant: 4 });
  throw new PreFlightError(
    `with the input off the meter reads ${read(metered)} and the load ${read(atLoad)}`,
    "are the meter's probes at the output of what the load is on, the right way round, is it set to dc voltage, " +
      'and are the leads of both in place?',
    whenLookedAt(bench),
  );
}

/** Half-width of what the instrument's maker promises; none where the driver does not say. */
function promised(instrument: OpenBench['meter'], volts: Volts): Volts {
  const { ofReading = 0, fixed = 0 } = instrument?.driver.accuracy['voltage'] ?? {};
  return ofReading * Math.abs(volts) + fixed;
}
