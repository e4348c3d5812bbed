import type { Dimension } from './quantity.js';

/** What is to be typed, with an example that is taken as it stands. */
export const typedAs: Readonly<Record<Dimension, string>> = {
  voltage: 'volts, for example 15.02 V',
  current: 'amperes, for example 3.98 A',
  resistance: 'ohms, for example 51 mohm',
  power: 'watts, for example 60.2 W',
  time: 'seconds or minutes, for example 1.5 min',
  temperature: 'degrees Celsius, for example 23.5 degC',
  'temperature-difference': 'kelvins, for example 12 K',
  ratio: 'per cent, for example 5 %',
  'voltage-rate': 'volts an hour, for example 0.02 V/h',
};
