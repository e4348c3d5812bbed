import type { Volts } from '../quantity/quantity.js';
import type { StepContext } from './step-kind.js';

/**
 * The open-circuit voltage that a step compares with: the one an earlier step measured, or else the
 * nameplate's. It only steers the step; the analysis makes its own from the readings.
 */
export function openCircuitVoltage({ known, underTest }: StepContext): Volts {
  return known['open-circuit-voltage'] ?? underTest.rated.voltage;
}
