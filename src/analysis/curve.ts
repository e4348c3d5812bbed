import type { Amperes, Volts } from '../quantity/quantity.js';
import type { Evidence, PointEvidence, StepEvidence } from './evidence.js';

/** One point of the V-I curve that the module held. */
export interface CurvePoint {
  readonly step: number;
  readonly set: Amperes;
  readonly current: Amperes;
  readonly voltage: Volts;
  /** Of single readings; undefined for a point with one reading. */
  readonly deviation: Volts | undefined;
  readonly readings: number;
}

/** All points that were held, of one step or of all steps, by rising current. */
export function heldPoints(steps: readonly StepEvidence[]): readonly CurvePoint[] {
  return steps
    .flatMap((step) => step.points.filter(isHeld).map((point) => curvePoint(step.step, point)))
    .sort((one, other) => one.current - other.current);
}

export function stepsOf(evidence: Evidence, kind: string): readonly StepEvidence[] {
  return evidence.steps.filter((step) => step.kind === kind);
}

function isHeld(point: PointEvidence): boolean {
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
    set: point.set.current ?? Number.NaN,
    current: point.current.mean,
    voltage: point.moduleVoltage.mean,
    deviation: point.moduleVoltage.sampleDeviation,
    readings: point.moduleVoltage.count,
  };
}
