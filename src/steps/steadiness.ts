import type { Amperes, Volts } from '../quantity/quantity.js';
import type { PointSeen } from './point.js';

export interface Probe extends PointSeen {
  readonly current: Amperes;
}

/** A spread this many times the usual one is an oscillation. */
const unsteadyRatio = 3;

/**
 * Where, among the probes that held, the readings begin to scatter: the highest steady current below the
 * lowest unsteady one. Undefined while there is no such edge. The usual spread is the median over the lower
 * half of the currents and never less than the last digit; at least half of the probes from the edge on are
 * unsteady, so that one disturbed reading is not worth a search. It only says where to look; the analysis
 * judges all readings of the run by a stricter rule.
 */
export function firstUnsteady(
  probes: readonly Probe[],
  resolution: Volts,
): { readonly steady: Amperes; readonly unsteady: Amperes } | undefined {
  const held = probes
    .filter((probe) => probe.outcome === 'held')
    .map(({ current, samples }) => ({ current, spread: spreadOf(samples.map((seen) => seen.voltage)) }))
    .sort((one, other) => one.current - other.current);
  const [lowest] = held;
  const highest = held.at(-1);
  if (lowest === undefined || highest === undefined) return undefined;
  const middle = (lowest.current + highest.current) / 2;
  const lower = held.filter(({ current }) => current <= middle).map(({ spread }) => spread);
  const usual = Math.max(median(lower), resolution);
  const unsteady = held.map(({ spread }) => spread > unsteadyRatio * usual);
  const first = unsteady.findIndex((is, index) => is && isMostly(unsteady.slice(index)));
  const above = held[first];
  const below = held[first - 1];
  return above === undefined || below === undefined
    ? undefined
    : { steady: below.current, unsteady: above.current };
}

function isMostly(flags: readonly boolean[]): boolean {
  return flags.filter(Boolean).length * 2 >= flags.length;
}

function median(values: readonly number[]): number {
  const sorted = values.toSorted((one, other) => one - other);
  const middle = Math.floor(sorted.length / 2);
  const upper = sorted[middle] ?? Number.NaN;
  return sorted.length % 2 === 1 ? upper : ((sorted[middle - 1] ?? upper) + upper) / 2;
}

function spreadOf(values: readonly number[]): number {
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  return Math.sqrt(values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (values.length - 1));
}
