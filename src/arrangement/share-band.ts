import type { DrawnBranch } from '../circuit/drawn-branch.js';
import type { WalkCorner } from '../circuit/share-walk.js';
import type { Amperes } from '../quantity/quantity.js';
import type { DrawnInterval } from '../statistics/coverage-interval.js';
import type { Band, Estimate } from './build.js';
import { bestPoints, drawnAt } from './group-draws.js';
import type { ShareBand } from './parallel-build.js';

const places = 200;

/** A group as its records have it: at its best estimate, and as drawn from what they leave open. */
export interface KnownGroup {
  readonly best: readonly DrawnBranch[];
  readonly drawn: readonly DrawnBranch[];
}

/**
 * Each module's current and the voltage of the bus over the load of the group: best estimate and, by the draws,
 * the probabilistically symmetric 95 % interval at each place (JCGM 101:2008, 7.7). Where the intervals of a bent
 * curve would leave out the best estimate they are widened to it.
 */
export function shareBand({ best, drawn }: KnownGroup, loads: readonly Amperes[]): ShareBand {
  const points = bestPoints(best, loads);
  const results = [...drawnAt(drawn, loads)];
  const band = (valueOf: (point: (typeof points)[number]) => number, column: number): Band => {
    const estimates = points.map((point, place) => around(valueOf(point), results[place]?.[column]));
    return {
      best: estimates.map(({ value }) => value),
      low: estimates.map(({ low }) => low),
      high: estimates.map(({ high }) => high),
    };
  };
  return {
    loads,
    busVoltage: band(({ busVoltage }) => busVoltage, best.length),
    currents: best.map((_, branch) => band(({ branches }) => branches[branch]?.current ?? 0, branch)),
  };
}

/** A best estimate within what the draws say of it; alone where they say nothing. */
export function around(value: number, drawn: DrawnInterval | undefined): Estimate {
  if (drawn === undefined) return { value, low: value, high: value };
  return { value, low: Math.min(value, drawn.low), high: Math.max(value, drawn.high) };
}

/** What rounding makes of the end of a line must not be beyond it. */
const arithmetic = 1e-9;

/**
 * The loads of the band: evenly from near 0 to the end, and the nearest of them moved to each corner of the best
 * estimate, so that its line through them is the true one.
 */
export function bandLoads(end: Amperes, corners: readonly WalkCorner[]): readonly Amperes[] {
  const last = end * (1 - arithmetic);
  const loads = Array.from({ length: places }, (_, place) => (last * (place + 1)) / places);
  const taken = new Set([places - 1]);
  for (const { load } of corners) {
    const corner = load * (1 - arithmetic);
    const place = Math.round((corner / last) * places) - 1;
    if (place < 0 || place >= places || taken.has(place)) continue;
    taken.add(place);
    loads[place] = corner;
  }
  return loads;
}
