import { momentsAt, RunningMoments } from '../statistics/running-moments.js';
import type { PointEvidence, Reach } from './point-evidence.js';

/**
 * Neighbours as one point: number, mean, scatter and extremes of all their readings, and the mean of their times.
 * A straight line over groups of looks is that through the looks; and so is where an exponential goes, and how
 * fast, where the groups are of one width T: the mean over each is the curve in its middle, but for one factor,
 * sinh(x)/x of its change, x being T/2τ.
 */
export function pooled(one: PointEvidence, other: PointEvidence): PointEvidence {
  const looks = one.looks + other.looks;
  const together = (of: (point: PointEvidence) => RunningMoments): RunningMoments => {
    const moments = new RunningMoments();
    moments.addAll(of(one));
    moments.addAll(of(other));
    return moments;
  };
  return {
    point: one.point,
    looks,
    reach: widest(reachOf(one), reachOf(other)),
    phase: one.phase,
    set: one.set,
    t: one.t + (other.t - one.t) * (other.looks / looks),
    outcome: one.outcome,
    moduleVoltage: together((point) => point.moduleVoltage),
    voltageBy: one.voltageBy === other.voltageBy ? one.voltageBy : 'load',
    loadVoltage: together((point) => point.loadVoltage),
    meterVoltage: together((point) => point.meterVoltage),
    current: together((point) => point.current),
    taps: tapsOf(one, other),
    temperature: together((point) => point.temperature),
    resistance: {
      values: together((point) => point.resistance.values),
      open: one.resistance.open + other.resistance.open,
    },
    of: one.of,
    samples: one.samples,
  };
}

function tapsOf(...points: readonly PointEvidence[]): PointEvidence['taps'] {
  const taps = new Map<string, RunningMoments>();
  for (const point of points) {
    for (const [at, moments] of point.taps) momentsAt(taps, at).addAll(moments);
  }
  return taps;
}

function reachOf({ reach, moduleVoltage, temperature }: PointEvidence): Reach {
  const mean = (moments: RunningMoments): number => (moments.count === 0 ? Number.NaN : moments.mean);
  const [volts, celsius] = [mean(moduleVoltage), mean(temperature)];
  return reach ?? { moduleVoltage: [volts, volts], temperature: [celsius, celsius] };
}

function widest(one: Reach, other: Reach): Reach {
  const wider = (by: keyof Reach): readonly [number, number] => {
    const there = [...one[by], ...other[by]].filter((value) => !Number.isNaN(value));
    return there.length === 0 ? [Number.NaN, Number.NaN] : [Math.min(...there), Math.max(...there)];
  };
  return { moduleVoltage: wider('moduleVoltage'), temperature: wider('temperature') };
}

/**
 * The same looks in points that stand for equally many each, so that each counts the same in a fit or a mean: those
 * of fewer looks are pooled up to the largest, and the last may stand for fewer. A first look that was kept for
 * itself is left out, as it has no neighbours of its own. Points of one look each are handed back as they are.
 */
export function evenly(points: readonly PointEvidence[]): readonly PointEvidence[] {
  const each = mostLooks(points);
  if (each === 1) return points;
  const [first, second] = points;
  const isAlone = first !== undefined && second !== undefined && first.looks < second.looks;
  const even: PointEvidence[] = [];
  let open: PointEvidence | undefined;
  for (const point of isAlone ? points.slice(1) : points) {
    open = open === undefined ? point : pooled(open, point);
    if (open.looks < each) continue;
    even.push(open);
    open = undefined;
  }
  return open === undefined ? even : [...even, open];
}

/** How many looks the one of most looks stands for; 1 where none was pooled. */
export function mostLooks(points: readonly PointEvidence[]): number {
  return points.reduce((most, { looks }) => Math.max(most, looks), 1);
}

/** How many points were taken, whatever is kept of them. */
export function taken(points: readonly PointEvidence[]): number {
  return points.reduce((sum, { looks }) => sum + looks, 0);
}
