import type { Amperes, Volts } from '../quantity/quantity.js';
import type { PointOutcome } from '../record/journal-event.js';
import { median } from '../statistics/checked.js';
import type { PointSeen } from './point.js';

export interface Probe {
  readonly current: Amperes;
  readonly outcome: PointOutcome;
  /** Standard deviation of the readings; undefined where there was one only. */
  readonly spread: Volts | undefined;
}

export function probeOf(current: Amperes, { outcome, voltage }: PointSeen): Probe {
  return { current, outcome, spread: voltage.sampleDeviation };
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
    .flatMap(({ outcome, current, spread }) =>
      outcome === 'held' && spread !== undefined ? [{ current, spread }] : [],
    )
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
