import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Volts } from '../quantity/quantity.js';
import { fUpperTail } from '../statistics/f-distribution.js';
import type { CurvePoint } from './curve.js';

/** A place on the line of regulation: of one point, or of the two that a ramp up and back took there. */
export interface Place {
  readonly current: Amperes;
  readonly voltage: Volts;
}

/** The points of a ramp, those of the way back taken together with those of the way up. */
export interface BothWays {
  readonly places: readonly Place[];
  /** Whether each place is the mean of both ways. */
  readonly paired: boolean;
  /** What the two ways differ by beyond their scatter, from up to down, where it is largest. */
  readonly drift: Volts | undefined;
}

/** Of the points on the way up; with fewer partners the way back was cut short, and is left out. */
const mostPaired = 0.9;
/** Two ways that chance lets differ as much less often than this do differ. */
const strictLevel = 1e-3;

/**
 * Takes the way back of a ramp together with its way up, by the mean at each set-point. Both ways lie
 * about the turning point like an object and its image: a current that was met so long before it is met as
 * long after it. What changes linearly in time (a module that warms slowly, a meter that wanders) has
 * therefore the same mean at every current, and leaves the slope alone; on the way up alone it would pass
 * for droop. What is curved in time stays, as scatter about the line.
 * @param resolution standard uncertainty of what the meter's last digit hides.
 */
export function bothWays(points: readonly CurvePoint[], resolution: Volts): BothWays {
  const up = points.filter(({ phase }) => phase !== 'down');
  const down = new Map(
    points.filter(({ phase }) => phase === 'down').map((point) => [keyOf(point), point] as const),
  );
  const pairs = up.flatMap((point) => {
    const back = down.get(keyOf(point));
    return back === undefined ? [] : [{ up: point, down: back }];
  });
  if (pairs.length === 0 || pairs.length < mostPaired * up.length) {
    return { places: up, paired: false, drift: undefined };
  }
  const places = pairs.map((pair) => ({
    current: (pair.up.current + pair.down.current) / 2,
    voltage: (pair.up.voltage + pair.down.voltage) / 2,
  }));
  return { places, paired: true, drift: driftOf(pairs, resolution) };
}

/** For a note: how a line through the places came about, and what the two ways showed. */
export function bothWaysNote({ paired, drift }: Pick<BothWays, 'paired' | 'drift'>): string {
  if (!paired) return '';
  if (drift === undefined) return ', each the mean of both ways; the ways agree';
  const by = formatQuantity(Math.abs(drift), 'voltage', { significant: 2 });
  return `, each the mean of both ways; up to ${by} ${drift < 0 ? 'lower' : 'higher'} on the way back: it warms or drifts`;
}

interface Pair {
  readonly up: CurvePoint;
  readonly down: CurvePoint;
}

/**
 * The mean square of the differences against what the scatter within the points explains, by an F test.
 * What the last digit hides is the same for all readings of a steady point, so it is not averaged out.
 */
function driftOf(pairs: readonly Pair[], resolution: Volts): Volts | undefined {
  const scattered = pairs.flatMap(({ up, down }) => [up, down]);
  const degreesOfFreedom = scattered.reduce((sum, { readings }) => sum + Math.max(0, readings - 1), 0);
  if (degreesOfFreedom === 0) return undefined;
  const withinMeans = scattered.map(({ deviation = 0, readings }) => deviation ** 2 / readings);
  const ofMean = withinMeans.reduce((sum, one) => sum + one, 0) / scattered.length;
  const explained = 2 * (ofMean + resolution ** 2);
  const differences = pairs.map(({ up, down }) => down.voltage - up.voltage);
  const seen = differences.reduce((sum, one) => sum + one ** 2, 0) / differences.length;
  if (seen === 0 || fUpperTail(seen / explained, pairs.length, degreesOfFreedom) > strictLevel) {
    return undefined;
  }
  return differences.reduce((most, one) => (Math.abs(one) > Math.abs(most) ? one : most), 0);
}

/** A ramp takes both ways to the very same set-points. */
function keyOf({ step, set }: CurvePoint): string {
  return `${step} ${set}`;
}
