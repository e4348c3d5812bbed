import type { Volts } from '../quantity/quantity.js';

/** What diodes are sold for, in V. Common practice, no published source. */
const grades: readonly Volts[] = [20, 40, 60, 100, 200, 400, 600, 800, 1000];

/** The reverse voltage of the diode to buy, that voltage at least. */
export function gradeFor(voltage: Volts): Volts {
  return grades.find((grade) => grade >= voltage) ?? Math.ceil(voltage / 100) * 100;
}
