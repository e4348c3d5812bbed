import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Volts } from '../quantity/quantity.js';
import { median } from '../statistics/checked.js';
import { fUpperTail } from '../statistics/f-distribution.js';
import { rectangular } from '../statistics/uncertainty-budget.js';
import type { CurvePoint } from './curve.js';
import type { Evidence } from './evidence.js';
import { type Finding, measured } from './finding.js';
import { moduleVoltageErrors, promised, promisedErrors } from './promised-errors.js';

/** Where the output begins to swing: between the last clearly steady current and the first clearly unsteady one. */
export interface Edge {
  readonly steady: Amperes;
  readonly unsteady: Amperes;
}

/** How many times the usual spread is unsteady; with five readings chance does that once in ten thousand. */
const unsteadyRatio = 3;
/** With two or three readings at a point chance does it more often, and then it takes more than the ratio. */
const strictLevel = 1e-4;
/** Where one point alone says so it must say it clearly: of so many points one scatters by chance. */
const loneRatio = 6;
/** What scatters more than this is not clearly steady: a swing may have begun that the meter half hides. */
const steadyRatio = 2;

interface Spread {
  readonly current: Amperes;
  readonly deviation: Volts;
  readonly degreesOfFreedom: number;
}

/**
 * Looks for the current from which on the readings scatter. The edge is where the fewest points are on the
 * wrong side: unsteady ones below, steady ones above. So one disturbed reading in the middle of a ramp is
 * not taken for an oscillation, and does not hide one either.
 * @param points held ones, by rising current.
 */
export function findEdge(points: readonly CurvePoint[], resolution: Volts): Edge | undefined {
  const spreads = points.flatMap(({ current, deviation, readings }) =>
    deviation === undefined ? [] : [{ current, deviation, degreesOfFreedom: readings - 1 }],
  );
  const usual = usualSpread(spreads, resolution);
  if (usual === undefined) return undefined;
  const unsteady = spreads.map((spread) => isUnsteady(spread, usual));
  const first = fewestOnTheWrongSide(unsteady);
  const above = spreads[first];
  if (above === undefined) return undefined;
  const alone = unsteady.slice(first).filter((is) => is).length === 1;
  if (alone && above.deviation <= loneRatio * usual.deviation) return undefined;
  const below = spreads.slice(0, first);
  const calm = below.findLast((spread) => spread.deviation <= steadyRatio * usual.deviation) ?? below[0];
  return calm === undefined ? undefined : { steady: calm.current, unsteady: above.current };
}

/**
 * The median spread at low currents, and never less than the meter's last digit. Of the lower half of the
 * points, of the lower half and of the lower quarter of the currents the calmest counts: a search crowds
 * its points near the limit, and a module may be restless at light load only.
 */
function usualSpread(spreads: readonly Spread[], resolution: Volts): Spread | undefined {
  const lowest = spreads.at(0)?.current ?? Number.NaN;
  const highest = spreads.at(-1)?.current ?? Number.NaN;
  const upTo = (share: number): readonly Spread[] =>
    spreads.filter((spread) => spread.current <= lowest + share * (highest - lowest));
  return [spreads.slice(0, Math.ceil(spreads.length / 2)), upTo(0.5), upTo(0.25)]
    .filter((band) => band.length >= 2)
    .map((band) => ({
      current: lowest,
      deviation: Math.max(median(band.map((spread) => spread.deviation)), resolution),
      degreesOfFreedom: band.reduce((sum, spread) => sum + spread.degreesOfFreedom, 0),
    }))
    .sort((one, other) => one.deviation - other.deviation)
    .at(0);
}

function isUnsteady({ deviation, degreesOfFreedom }: Spread, usual: Spread): boolean {
  if (deviation <= unsteadyRatio * usual.deviation) return false;
  const ratio = (deviation / usual.deviation) ** 2;
  return fUpperTail(ratio, degreesOfFreedom, usual.degreesOfFreedom) < strictLevel;
}

/** Where to cut, from the second place on; the length where no cut is better than none. Of equals the lowest. */
function fewestOnTheWrongSide(unsteady: readonly boolean[]): number {
  let fewest = unsteady.filter((is) => is).length;
  let cut = unsteady.length;
  let wrong = unsteady.length - fewest;
  unsteady.forEach((is, index) => {
    wrong += is ? 1 : -1;
    if (wrong >= fewest) return;
    fewest = wrong;
    cut = index + 1;
  });
  return cut;
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
        promised(`${current.of}, resolution`, current.resolution),
      ],
      { step: points.find((point) => point.current === edge.unsteady)?.step ?? null, note },
    ),
  ];
}
