import type { Volts } from '../quantity/quantity.js';
import { valueOf } from './guards.js';
import type { OpenBench } from './open-bench.js';
import type { Taken } from './sample.js';

type Described = Pick<OpenBench, 'description'>;

/**
 * The voltage of the whole, from where the bench file says that it is read: the meter's, or the load's and
 * what the leads lose; the latter also while the meter's probes are elsewhere. Not a number when it could
 * not be read.
 */
export function moduleVoltage({ description }: Described, taken: readonly Taken[]): Volts {
  const metered = taken.some(({ of, what, at }) => of === 'meter' && what === 'voltage' && at === undefined);
  if (description.voltageFrom === 'meter-at-module' && metered) return valueOf(taken, 'meter', 'voltage');
  const current = valueOf(taken, 'load', 'current');
  return valueOf(taken, 'load', 'voltage') + current * description.leads.resistance;
}

/** The last digit of the instrument that `moduleVoltage` comes from; 0 when its driver does not say. */
export function voltageResolution({
  description,
  load,
  meter,
}: Pick<OpenBench, 'description' | 'load' | 'meter'>): Volts {
  const instrument = description.voltageFrom === 'meter-at-module' ? meter : load.instrument;
  return instrument?.driver.accuracy['voltage']?.resolution ?? 0;
}
