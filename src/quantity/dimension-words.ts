import type { Dimension } from './quantity.js';

interface DimensionWords {
  /** With its article: "a current". */
  readonly name: string;
  readonly examples: readonly [string, string, ...string[]];
}

/** How messages speak of a dimension, and what a well-written one looks like. */
export const dimensionWords: Readonly<Record<Dimension, DimensionWords>> = {
  voltage: { name: 'a voltage', examples: ['15 V', '200 mV'] },
  current: { name: 'a current', examples: ['4 A', '400 mA'] },
  resistance: { name: 'a resistance', examples: ['35 mΩ', '35 mohm', '2 kΩ'] },
  power: { name: 'a power', examples: ['60 W', '500 mW'] },
  time: { name: 'a time', examples: ['20 ms', '5 s', '1.5 min'] },
  temperature: { name: 'a temperature', examples: ['40 °C', '40 degC'] },
  'temperature-difference': { name: 'a difference of temperatures', examples: ['35 K', '0.5 K'] },
  ratio: { name: 'a ratio', examples: ['80 %', '0.5 %'] },
  'voltage-rate': { name: 'a rate of voltage', examples: ['2 mV/h', '0.1 V/h'] },
};

/** `a current is needed: 4 A, 400 mA`. */
export function needed(dimension: Dimension): string {
  const { name, examples } = dimensionWords[dimension];
  return `${name} is needed: ${examples.join(', ')}`;
}
