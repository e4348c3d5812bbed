import type { Amperes, Ratio, Volts } from '../quantity/quantity.js';
import type { Moment } from './moment.js';

/** What the source has been told. */
export interface SourceState {
  readonly output: 'on' | 'off';
  readonly setVoltage: Volts;
  readonly setCurrent: Amperes;
}

/** How a source wakes, and what *RST makes of it. */
export const sourceAtRest: SourceState = { output: 'off', setVoltage: 0, setCurrent: 0 };

/** Of what a module takes in, what it gives. */
const EFFICIENCY: Ratio = 0.85;
/** What a module takes where nothing is taken from it. */
const IDLE: Amperes = 0.02;

/** What is at the output of a source, and what flows out of it. */
export interface SourceOutput {
  readonly voltage: Volts;
  readonly current: Amperes;
}

/**
 * What the modules ask of it, as far as it gives that: where they ask for more than it may give its current stays
 * at its limit and its voltage sags. What a sagging input does to a module is not simulated.
 */
export function sourceOutput(
  { output, setVoltage, setCurrent }: SourceState,
  { modules }: Pick<Moment, 'modules'>,
): SourceOutput {
  if (output === 'off' || setVoltage === 0) return { voltage: 0, current: 0 };
  const fed = modules.filter(({ phase }) => phase !== 'off');
  const watts = fed.reduce((sum, { voltage, current }) => sum + Math.max(0, voltage * current), 0);
  const asked = watts / EFFICIENCY / setVoltage + IDLE * fed.length;
  if (asked <= setCurrent) return { voltage: setVoltage, current: asked };
  return { voltage: setVoltage * (setCurrent / asked), current: setCurrent };
}
