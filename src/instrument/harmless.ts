import type { Driver } from '../files/driver.js';
import type { OperationValues } from './message.js';

/** What would connect or energise something. */
const switching: Readonly<Record<string, string>> = {
  'input-on': 'would switch on',
  'output-on': 'would switch on',
  'close-channel': 'would connect something',
};

/** Harmless at the rating only: in constant voltage below the module's, switching on is a short. */
const harmlessAt: Readonly<Record<string, 'voltage' | 'current' | 'power'>> = {
  'voltage-mode': 'voltage',
  'set-voltage': 'voltage',
  'protect-current': 'current',
  'protect-voltage': 'voltage',
  'protect-power': 'power',
};

/** Why an operation is never sent in a trial; undefined where it may be. */
export function whyLeftOut(operation: string, { role, ratings }: Driver): string | undefined {
  const rating = role === 'source' ? undefined : harmlessAt[operation];
  if (rating === undefined || ratings[rating] !== undefined) return switching[operation];
  return `the driver states no rated ${rating}, and no other value is sure to do no harm`;
}

/**
 * What an operation is given in a trial. No current; the rated voltage, at which a load in constant voltage
 * draws none either; to what protects the rating, so that no protection is left at zero. A source is set to
 * zero.
 */
export function harmlessValues(operation: string, { role, ratings }: Driver): OperationValues {
  const { current = 0, voltage = 0, power = 0 } = ratings;
  return {
    amps: operation === 'protect-current' ? current : 0,
    volts: role === 'source' ? 0 : voltage,
    watts: power,
    channel: 1,
  };
}
