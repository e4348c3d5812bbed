import type { Amperes, Volts, Watts } from '../quantity/quantity.js';
import { formatScpiNumber } from './scpi-number.js';

/** What an operation may be given; each goes in the place of its name in braces. */
export interface OperationValues {
  readonly amps?: Amperes;
  readonly volts?: Volts;
  readonly watts?: Watts;
  readonly channel?: number;
}

const placeholder = /\{(amps|volts|watts|channel)\}/g;

/**
 * A driver's message with its placeholders filled.
 * @throws RangeError when a value it needs is missing or not finite.
 */
export function fillMessage(message: string, values: OperationValues): string {
  return message.replace(placeholder, (_, name: keyof OperationValues) => {
    const value = values[name];
    if (value === undefined) throw new RangeError(`"${message}" needs a value for {${name}}.`);
    // A channel is a name made of digits: 101, never 1.01E+2.
    return name === 'channel' ? String(Math.trunc(value)) : formatScpiNumber(value);
  });
}
