import { type ClimbedPoint, type ClimbingBranch, climb } from '../circuit/group-climb.js';
import { imbalanceOf } from '../circuit/imbalance.js';
import type { CurveLimit } from '../circuit/module-curve.js';
import type { DrawnBranch } from '../circuit/drawn-branch.js';
import { ShareWalk, type WalkCorner, type WalkEnd } from '../circuit/share-walk.js';
import type { Amperes, Ratio } from '../quantity/quantity.js';
import { coverageInterval, type DrawnInterval, medianOf } from '../statistics/coverage-interval.js';
import { usualSag } from './drawn-group.js';

/** The draws of one number: as many lie below its median as above. */
export interface DrawnNumber extends DrawnInterval {
  readonly median: number;
}

/** How far a group goes, over all its draws. */
export interface Extent {
  /** How often each branch is the first at its limit. */
  readonly first: readonly Ratio[];
  readonly firstLoad: DrawnNumber;
  /** That it holds, every module within what it is usable for. */
  readonly usable: DrawnNumber;
  /** That it holds at all. */
  readonly end: DrawnNumber;
}

export function extentOf(branches: readonly DrawnBranch[]): Extent {
  const draws = drawsOf(branches);
  const walk = new ShareWalk(branches, usualSag);
  const counts = branches.map(() => 0);
  const firstLoad = new Float64Array(draws);
  const usable = new Float64Array(draws);
  const ends = new Float64Array(draws);
  for (let draw = 0; draw < draws; draw += 1) {
    const end = walk.climb(draw);
    if (end.first >= 0) counts[end.first] = (counts[end.first] ?? 0) + 1;
    firstLoad[draw] = end.firstLoad;
    usable[draw] = Math.min(end.end, end.ceiling);
    ends[draw] = end.end;
  }
  return {
    first: counts.map((count) => count / draws),
    firstLoad: drawnNumber(firstLoad),
    usable: drawnNumber(usable),
    end: drawnNumber(ends),
  };
}

function drawnNumber(draws: Float64Array): DrawnNumber {
  return { median: medianOf(draws), ...coverageInterval(draws) };
}

/** How far the best estimate goes, and what happens on its way. */
export function wayUp(best: readonly DrawnBranch[]): {
  readonly end: WalkEnd;
  readonly corners: readonly WalkCorner[];
} {
  const corners: WalkCorner[] = [];
  const end = new ShareWalk(best, usualSag).climb(0, (corner) => corners.push(corner));
  return { end, corners };
}

/** The points of the best estimate, its modules' whole curves solved at each load. */
export function bestPoints(best: readonly DrawnBranch[], loads: readonly Amperes[]): readonly ClimbedPoint[] {
  return climb(best.map(climbing), loads);
}

function climbing({ voltage, droop, ballast, limit, past, beyond }: DrawnBranch): ClimbingBranch {
  const [openCircuitVoltage = 0] = voltage;
  const [droopResistance = 0] = droop;
  const [resistance = 0] = ballast;
  const [current = 0] = limit;
  const [further = 0] = beyond;
  const curveLimit: Record<DrawnBranch['past'], CurveLimit> = {
    holds:
      further === Number.POSITIVE_INFINITY
        ? { style: 'constant-current', current }
        : { style: 'constant-current', current, slope: further },
    folds: { style: 'foldback', current, shortCircuit: further },
    'keeps-power': { style: 'constant-power', current },
    leaves: { style: 'constant-current', current },
  };
  return {
    curve: { openCircuitVoltage, droopResistance, limit: curveLimit[past] },
    resistance,
    leaves: past === 'leaves',
  };
}

/** So many numbers are held at once at most, whatever is asked for. */
const mostHeld = 2 ** 21;

/**
 * What the draws make of each branch's current and of the bus (last) at each load; undefined where too few of
 * them hold that load to tell. Draws in which the group has failed by then do not count: the interval is for the
 * case that it holds. Worked out in blocks of loads, so that memory stays bounded.
 * @param loads rising.
 */
export function* drawnAt(
  branches: readonly DrawnBranch[],
  loads: readonly Amperes[],
): Generator<readonly (DrawnInterval | undefined)[]> {
  const draws = drawsOf(branches);
  const width = branches.length + 1;
  const block = Math.max(1, Math.floor(mostHeld / (width * draws)));
  const walk = new ShareWalk(branches, usualSag);
  const values = new Float64Array(Math.min(block, loads.length) * width * draws);
  for (let from = 0; from < loads.length; from += block) {
    const some = Float64Array.from(loads.slice(from, from + block));
    for (let draw = 0; draw < draws; draw += 1) walk.currentsAt(draw, some, { values, draws });
    for (const load of some.keys()) {
      yield Array.from({ length: width }, (_, column) => {
        const start = (load * width + column) * draws;
        return drawnInterval(values.subarray(start, start + draws));
      });
    }
  }
}

/** At one load: the imbalance of the currents. */
export function drawnImbalance(branches: readonly DrawnBranch[], load: Amperes): DrawnInterval | undefined {
  const draws = drawsOf(branches);
  const values = new Float64Array((branches.length + 1) * draws);
  const walk = new ShareWalk(branches, usualSag);
  const imbalances = new Float64Array(draws);
  for (let draw = 0; draw < draws; draw += 1) {
    walk.currentsAt(draw, [load], { values, draws });
    imbalances[draw] = imbalanceOf(branches.map((_, branch) => values[branch * draws + draw] ?? Number.NaN));
  }
  return drawnInterval(imbalances);
}

/** Who carries most at a load, as a share of the draws in which the group holds it. */
export function mostLoaded(branches: readonly DrawnBranch[], load: Amperes): readonly Ratio[] {
  const draws = drawsOf(branches);
  const values = new Float64Array((branches.length + 1) * draws);
  const walk = new ShareWalk(branches, usualSag);
  const counts = branches.map(() => 0);
  let held = 0;
  for (let draw = 0; draw < draws; draw += 1) {
    walk.currentsAt(draw, [load], { values, draws });
    const currents = branches.map((_, branch) => values[branch * draws + draw] ?? Number.NaN);
    const most = currents.indexOf(Math.max(...currents));
    if (most < 0) continue;
    held += 1;
    counts[most] = (counts[most] ?? 0) + 1;
  }
  return counts.map((count) => (held === 0 ? 0 : count / held));
}

/** Fewer draws than this tell nothing of 95 %. */
const fewest = 40;

/** Of the draws that are numbers; they are moved to the front. */
function drawnInterval(draws: Float64Array): DrawnInterval | undefined {
  let count = 0;
  for (const value of draws) {
    if (Number.isNaN(value)) continue;
    draws[count] = value;
    count += 1;
  }
  return count < Math.min(fewest, draws.length) ? undefined : coverageInterval(draws, count);
}

function drawsOf([first]: readonly DrawnBranch[]): number {
  return first?.voltage.length ?? 0;
}
