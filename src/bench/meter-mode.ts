import type { Instrument } from '../instrument/instrument.js';
import { WrongPlaceError } from './wrong-place-error.js';

/**
 * Asks a meter whether it measures dc voltage, where its driver says how to ask.
 * @throws WrongPlaceError when it says that it measures something else.
 */
export async function checkMeasuresVoltage(meter: Instrument): Promise<void> {
  if (!meter.reads('measures-voltage') || (await meter.flag('measures-voltage'))) return;
  throw new WrongPlaceError(
    'meter-in-wrong-mode',
    `the meter at ${meter.address} says that it does not measure dc voltage`,
    'set it to dc voltage at its panel and begin again; nobody should touch it while a procedure runs',
  );
}
