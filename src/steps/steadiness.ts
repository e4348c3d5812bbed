import type { Amperes } from '../quantity/quantity.js';
import type { PointSeen } from './point.js';

export interface Probe extends PointSeen {
  readonly current: Amperes;
}

/** A spread this many times that of the calmest probes is an oscillation. The analysis uses the same rule. */
const unsteadyRatio = 4;

/**
 * Where, among the probes that held, the readings begin to scatter: the highest steady current below the
 * lowest unsteady one. Undefined while there is no such edge.
 */
export function firstUnsteady(probes: readonly Probe[]): { steady: Amperes; unsteady: Amperes } | undefined {
  const held = probes
    .filter((probe) => probe.outcome === 'held')
    .map((probe) => ({ current: probe.current, spread: spreadOf(probe.samples.map((seen) => seen.voltage)) }))
    .sort((one, other) => one.current - other.current);
  const calm = Math.min(...held.map((probe) => probe.spread).filter((spread) => spread > 0));
  const first = held.findIndex((probe) => probe.spread > unsteadyRatio * calm);
  const unsteady = held[first];
  const steady = held[first - 1];
  if (unsteady === undefined || steady === undefined) return undefined;
  return { steady: steady.current, unsteady: unsteady.current };
}

function spreadOf(values: readonly number[]): number {
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  return Math.sqrt(values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (values.length - 1));
}
