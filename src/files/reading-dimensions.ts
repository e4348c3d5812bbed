import type { Dimension } from '../quantity/quantity.js';

/** What each reading that is a number measures; the others are a yes or a no. */
export const readingDimensions = {
  voltage: 'voltage',
  current: 'current',
  power: 'power',
  resistance: 'resistance',
  temperature: 'temperature',
} as const satisfies Record<string, Dimension>;

/** The error of a temperature is a difference of temperatures; all others are like what they are errors of. */
export function errorDimension(dimension: Dimension): Dimension {
  return dimension === 'temperature' ? 'temperature-difference' : dimension;
}
