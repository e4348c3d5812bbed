import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Ohms, Ratio, Volts } from '../quantity/quantity.js';
import { median } from '../statistics/checked.js';
import { rectangular } from '../statistics/uncertainty-budget.js';
import { heldPoints, stepsOf, type CurvePoint } from './curve.js';
import type { Evidence, StepEvidence } from './evidence.js';
import { type Finding, measured } from './finding.js';
import { moduleVoltageErrors, promised, promisedErrors } from './promised-errors.js';
import { soundLine } from './sound-line.js';

/** Between what the module held and where it dropped out, as currents that really flowed. */
export interface DropoutBracket {
  readonly step: number;
  readonly held: Amperes;
  readonly dropped: Amperes;
  /** From the highest held to the lowest dropped point; infinite where no voltage could be read there. */
  readonly fall: Volts;
  /** How far above the dropped current one was held earlier; undefined where none was. */
  readonly heldAbove: Amperes | undefined;
}

/**
 * The bracket of the whole record: below the lowest set-point that any step saw dropped, the highest that
 * was held; undefined when everything asked for was held. A search goes before a climb where both speak.
 */
export function dropoutBracket(evidence: Evidence): DropoutBracket | undefined {
  const steps = ['dropout-search', 'load-ramp', 'sharing-log', 'stack-check'].flatMap((kind) =>
    stepsOf(evidence, kind),
  );
  const dropped = steps
    .flatMap(droppedPoints)
    .sort((one, other) => one.set - other.set)
    .at(0);
  if (dropped === undefined) return undefined;
  const below = (points: readonly CurvePoint[]): readonly CurvePoint[] =>
    points.filter((point) => point.set < dropped.set);
  const holding = steps.find((one) => below(heldPoints([one])).length > 0);
  if (holding === undefined) return undefined;
  const held = heldPoints([holding]);
  const highest = [...below(held)].sort((one, other) => one.set - other.set).at(-1);
  if (highest === undefined) return undefined;
  const flowing = readBackLine(held);
  const most = held.reduce((highest, point) => Math.max(highest, point.set), 0);
  return {
    step: dropped.step,
    held: flowing(highest.set),
    dropped: flowing(dropped.set),
    fall: highest.voltage - dropped.voltage,
    heldAbove: most >= dropped.set ? flowing(most) - flowing(dropped.set) : undefined,
  };
}

interface DroppedPoint {
  readonly step: number;
  readonly set: Amperes;
  /** Endlessly low where none could be read. */
  readonly voltage: Volts;
}

function droppedPoints({ step, points }: StepEvidence): readonly DroppedPoint[] {
  return points.flatMap(({ outcome, phase, set, moduleVoltage }) => {
    if (outcome !== 'dropped' || phase === 'recovery' || set.current === undefined) return [];
    const voltage = moduleVoltage.count > 0 ? moduleVoltage.mean : Number.NEGATIVE_INFINITY;
    return [{ step, set: set.current, voltage }];
  });
}

/**
 * The current that is read back at a set-point. At a dropout the reading itself means nothing; but where
 * the module held, readings lie on a straight line over the set-points. Both ends of the bracket are taken
 * from it, so that the scatter of a single reading can't turn a narrow bracket round.
 */
function readBackLine(held: readonly CurvePoint[]): (set: Amperes) => Amperes {
  const sets = held.map((point) => point.set);
  if (new Set(sets).size >= 3) {
    const fit = soundLine(
      sets,
      held.map((point) => point.current),
    );
    if (fit !== undefined && fit.slope > 0) return (set) => fit.intercept + fit.slope * set;
  }
  const nearest = held.at(-1);
  return (set) => (nearest === undefined ? set : set + (nearest.current - nearest.set));
}

/** A single reading decides whether a point was held, and lies this many standard deviations away at most. */
const widest = 3;

/**
 * `dropout-current`: the middle of the bracket; rectangular in it, with the promise of the load's current.
 * Where the voltage does not break down but sinks through the sag, what is uncertain of the voltage there
 * decides where the sag is met, and counts as a current by the resistance there: the scatter of single
 * readings, and the leads where they were added by calculation. A gain of the voltage drops out, as the
 * sag is a share of what the same instrument read at no load.
 * @param curve the points that were held, and how steeply the voltage falls at their upper end.
 */
export function dropoutFindings(
  evidence: Evidence,
  bracket: DropoutBracket | undefined,
  curve: { readonly held: readonly CurvePoint[]; readonly resistance: Ohms | undefined },
): readonly Finding[] {
  if (bracket === undefined) return [];
  const { held, dropped, step } = bracket;
  const value = (held + dropped) / 2;
  const current = promisedErrors(evidence.header, 'load', 'current');
  const slope = slopeThrough(evidence, bracket, curve);
  return [
    measured(
      'dropout-current',
      'current',
      value,
      [
        promised('between the held and the dropped current', rectangular(Math.abs(dropped - held) / 2)),
        ...(slope === undefined
          ? []
          : [promised('scatter of the voltage at the sag', rectangular(slope.scatter))]),
        ...(slope === undefined || slope.leads === 0
          ? []
          : [promised('resistance of the leads', slope.leads * value)]),
        promised(`${current.of}, gain`, current.gain * value),
        promised(`${current.of}, offset`, current.offset),
        promised(`${current.of}, resolution`, current.resolution),
      ],
      { step, note: noteOf(bracket, slope) },
    ),
  ];
}

/** Where the voltage goes through the sag on a slope. */
interface Slope {
  /** The scatter of a reading, as a current. */
  readonly scatter: Amperes;
  /** Standard uncertainty of the leads' resistance, as a share of the resistance there. */
  readonly leads: Ratio;
}

/** Undefined where the voltage fell by more than its slope explains: the module broke down. */
function slopeThrough(
  evidence: Evidence,
  { held, dropped, fall }: DropoutBracket,
  curve: { readonly held: readonly CurvePoint[]; readonly resistance: Ohms | undefined },
): Slope | undefined {
  const { resistance = 0 } = curve;
  const { instrument, leads } = moduleVoltageErrors(evidence.header);
  const deviation = usualDeviation(curve.held, instrument.resolution);
  const explained = 2 * resistance * Math.abs(dropped - held) + 2 * widest * deviation;
  if (resistance <= 0 || fall > explained) return undefined;
  return { scatter: (widest * deviation) / resistance, leads: leads / resistance };
}

function noteOf({ held, dropped, heldAbove }: DropoutBracket, slope: Slope | undefined): string {
  const between =
    `held ${formatQuantity(held, 'current', { significant: 4 })}, ` +
    `dropped ${formatQuantity(dropped, 'current', { significant: 4 })}`;
  const sinks = slope === undefined ? '' : '; the voltage sinks there, it does not break down';
  const moved = heldAbove !== undefined && heldAbove >= 2 * (slope?.scatter ?? 0);
  return `${between}${sinks}${moved ? '; it had held more before: the limit came down meanwhile' : ''}`;
}

/** Of single readings; never less than the last digit hides. */
function usualDeviation(held: readonly CurvePoint[], resolution: Volts): Volts {
  const deviations = held.flatMap(({ deviation }) => (deviation === undefined ? [] : [deviation]));
  return deviations.length === 0 ? resolution : Math.max(median(deviations), resolution);
}
