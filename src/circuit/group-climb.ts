import { type ModuleCurve, knee } from './module-curve.js';
import { type Branch, type GroupPoint, groupPoints } from './parallel-group.js';

/** A way from a module to the bus that may be gone once the module was pushed past its limit. */
export interface ClimbingBranch {
  readonly curve: ModuleCurve;
  /** Ballast and wiring, Ω. */
  readonly resistance: number;
  /** It pulses past its limit, or switches itself off; its `curve` then counts up to there. */
  readonly leaves: boolean;
}

/** A point that a group comes to, and who has left on the way. */
export interface ClimbedPoint extends GroupPoint {
  readonly left: readonly boolean[];
}

/**
 * The points that a group comes to as a load on its bus climbs slowly: `groupPoints` of those that are still
 * there. One that is pushed past its limit and does not bear it leaves, the hardest pushed first; then the rest
 * carries everything, and may be pushed past its own limits. With all of them gone the bus is at 0 V.
 * @param loads rising, in A, 0 at least.
 */
export function climb(
  branches: readonly ClimbingBranch[],
  loads: readonly number[],
): readonly ClimbedPoint[] {
  const left = branches.map(() => false);
  return loads.map((load) => {
    for (;;) {
      const point = pointAt(branches, left, load);
      const next = hardestPushed(branches, left, point);
      if (next === undefined) return { ...point, left: [...left] };
      left[next] = true;
    }
  });
}

function pointAt(branches: readonly ClimbingBranch[], left: readonly boolean[], load: number): GroupPoint {
  const present = branches.map(({ curve, resistance }, index): Branch => ({
    source: left[index] === true ? { kind: 'off' } : { kind: 'module', curve },
    resistance,
  }));
  const [highest] = groupPoints(present, { kind: 'current', current: load, leastVoltage: 0, leads: 0 });
  return highest ?? { busVoltage: 0, current: 0, branches: branches.map(() => ({ current: 0, voltage: 0 })) };
}

/** What rounding makes of a module that stands just at its limit is no push. */
const arithmetic = 1e-12;

/** Of those that leave when pushed: as the bus falls, the one whose limit it reaches first. */
function hardestPushed(
  branches: readonly ClimbingBranch[],
  left: readonly boolean[],
  point: GroupPoint,
): number | undefined {
  let hardest: { readonly index: number; readonly bus: number } | undefined;
  for (const [index, { curve, resistance, leaves }] of branches.entries()) {
    if (!leaves || left[index] === true) continue;
    const turn = knee(curve);
    const bus = turn.voltage - resistance * turn.current;
    const isPushed = point.busVoltage < bus - arithmetic * curve.openCircuitVoltage;
    if (isPushed && !(hardest !== undefined && hardest.bus >= bus)) hardest = { index, bus };
  }
  return hardest?.index;
}
