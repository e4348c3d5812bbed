import { formatQuantity } from './format-quantity.js';
import type { Dimension } from './quantity.js';

/** To three digits, and never up: what is recommended must not grow by being written. Of 0 or more. */
export function roundedDown(value: number, dimension: Dimension): string {
  if (value === 0) return formatQuantity(0, dimension);
  const step = 10 ** (Math.floor(Math.log10(value)) - 2);
  // A whole number of steps is not made one less by what dividing loses.
  const down = Math.floor(value / step + 1e-9) * step;
  return formatQuantity(down, dimension, { significant: 3 });
}
