import type { Amperes, Volts } from '../quantity/quantity.js';
import type { Evidence, PointEvidence, StepEvidence } from './evidence.js';

/** One point of the V-I curve that the module held. */
export interface CurvePoint {
  readonly step: number;
  readonly phase: PointEvidence['phase'];
  readonly set: Amperes;
  readonly current: Amperes;
  readonly voltage: Volts;
  /** Of single readings; undefined for a point with one reading. */
  readonly deviation: Volts | undefined;
  readonly readings: number;
}

/**
 * All points that were held, of one step or of all steps, by rising current. Of a soak the last one only:
 * the thousand before it say the same of one and the same current, and would outweigh all others.
 */
export function heldPoints(steps: readonly StepEvidence[]): readonly CurvePoint[] {
  return steps
    .flatMap((step) => {
      const held = step.points.filter(isHeld);
      const lastOfSoak = held.findLast(({ phase }) => phase === 'soak');
      return held
        .filter((point) => point.phase !== 'soak' || point === lastOfSoak)
        .map((point) => curvePoint(step.step, point));
    })
    .sort((one, other) => one.current - other.current);
}

/**
 * Those that were taken on the way up, or near the limit. On the way back and after a soak the module is
 * warmer, and a curve through cold and warm points would be bent where the module is straight.
 */
export function coldPoints(points: readonly CurvePoint[]): readonly CurvePoint[] {
  return points.filter(({ phase }) => phase !== 'down' && phase !== 'soak');
}

export function stepsOf(evidence: Evidence, kind: string): readonly StepEvidence[] {
  return evidence.steps.filter((step) => step.kind === kind);
}

/** Whether a point is one of the V-I curve: the module held the current that was set. */
export function isHeld(point: PointEvidence): boolean {
  return (
    point.outcome === 'held' &&
    point.phase !== 'recovery' &&
    point.set.current !== undefined &&
    point.current.count > 0 &&
    point.moduleVoltage.count > 0
  );
}

function curvePoint(step: number, point: PointEvidence): CurvePoint {
  return {
    step,
    phase: point.phase,
    set: point.set.current ?? Number.NaN,
    current: point.current.mean,
    voltage: point.moduleVoltage.mean,
    deviation: point.moduleVoltage.sampleDeviation,
    readings: point.moduleVoltage.count,
  };
}
