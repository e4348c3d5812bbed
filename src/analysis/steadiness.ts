import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Volts } from '../quantity/quantity.js';
import { median } from '../statistics/checked.js';
import { rectangular } from '../statistics/uncertainty-budget.js';
import type { CurvePoint } from './curve.js';
import type { Evidence } from './evidence.js';
import { type Finding, measured } from './finding.js';
import { moduleVoltageErrors, promised, promisedErrors } from './promised-errors.js';

/** Where the output begins to swing: between the last steady current and the first unsteady one. */
export interface Edge {
  readonly steady: Amperes;
  readonly unsteady: Amperes;
}

/** A spread this many times the usual one is no chance: with five readings, less than once in a million. */
const unsteadyRatio = 4;

/**
 * Looks for the current from which on the readings scatter. The usual spread is the median over the
 * points in the lower half of the currents, and never less than the meter's last digit. The edge is the
 * lowest unsteady point above which at least half of the points are unsteady too, so that one disturbed
 * reading in the middle of a ramp is not taken for an oscillation.
 * @param points held ones, by rising current.
 */
export function findEdge(points: readonly CurvePoint[], resolution: Volts): Edge | undefined {
  const spread = points.flatMap(({ current, deviation }) =>
    deviation === undefined ? [] : [{ current, deviation }],
  );
  const lower = spread.slice(0, Math.ceil(spread.length / 2)).map((point) => point.deviation);
  if (lower.length < 2) return undefined;
  const usual = Math.max(median(lower), resolution);
  const unsteady = spread.map((point) => point.deviation > unsteadyRatio * usual);
  const first = unsteady.findIndex((is, index) => is && isMostly(unsteady.slice(index)));
  const above = spread[first];
  const below = spread[first - 1];
  return above === undefined || below === undefined
    ? undefined
    : { steady: below.current, unsteady: above.current };
}

function isMostly(flags: readonly boolean[]): boolean {
  return flags.filter(Boolean).length * 2 >= flags.length;
}

/** `unsteady-above-current`: the middle of the edge, rectangular between its ends. */
export function steadinessFindings(evidence: Evidence, points: readonly CurvePoint[]): readonly Finding[] {
  const edge = findEdge(points, moduleVoltageErrors(evidence.header).instrument.resolution);
  if (edge === undefined) return [];
  const value = (edge.steady + edge.unsteady) / 2;
  const current = promisedErrors(evidence.header, 'load', 'current');
  const note =
    `steady at ${formatQuantity(edge.steady, 'current', { significant: 4 })}, ` +
    `swinging at ${formatQuantity(edge.unsteady, 'current', { significant: 4 })}`;
  return [
    measured(
      'unsteady-above-current',
      'current',
      value,
      [
        promised(
          'between the last steady and the first unsteady point',
          rectangular((edge.unsteady - edge.steady) / 2),
        ),
        promised(`${current.of}, gain`, current.gain * value),
        promised(`${current.of}, offset`, current.offset),
      ],
      { step: points.find((point) => point.current === edge.unsteady)?.step ?? null, note },
    ),
  ];
}
