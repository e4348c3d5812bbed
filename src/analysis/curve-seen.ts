import type { Ohms, Volts } from '../quantity/quantity.js';
import { type BrokenLineFit, predictBrokenLine } from '../statistics/broken-line-fit.js';
import type { Place } from './both-ways.js';
import { coldPoints, type CurvePoint, heldPoints, stepsOf } from './curve.js';
import { type DropoutBracket, dropoutBracket, dropoutFindings } from './dropout.js';
import type { Evidence } from './evidence.js';
import { type Finding, numberNamed } from './finding.js';
import { type LimitTrace, limitTraceOf } from './limit-trace.js';
import { oncePerEvidence } from './once-per-evidence.js';
import { findKnee } from './onset.js';
import { openCircuitFindings } from './open-circuit.js';
import { regulationFindings } from './regulation.js';
import { type RegulationLine, regulationLine } from './regulation-line.js';
import { steadinessFindings } from './steadiness.js';

/**
 * Which points of a record speak for what, and what is laid through them: worked out in this one place, so that
 * findings and charts rest on the same.
 */
export interface CurveSeen {
  /** By rising current, as all that follow. */
  readonly held: readonly CurvePoint[];
  /** Those held below the current from which on the output swings. */
  readonly steady: readonly CurvePoint[];
  /** Of these, those that a knee is looked for in. */
  readonly cold: readonly CurvePoint[];
  readonly knee: BrokenLineFit | undefined;
  /** The line beyond it, from the knee to the last of these points; empty without a knee. */
  readonly beyondKnee: readonly Place[];
  /** Of the steady ones, those of a ramp below the knee: the line goes through them. */
  readonly regulated: readonly CurvePoint[];
  readonly line: RegulationLine | undefined;
  readonly bracket: DropoutBracket | undefined;
  /** Of the limit at constant voltage. */
  readonly trace: LimitTrace | undefined;
  readonly openCircuit: Volts | undefined;
  readonly droop: Ohms | undefined;
  /** What was found on the way, by question. */
  readonly findings: {
    readonly idle: readonly Finding[];
    readonly unsteady: readonly Finding[];
    readonly regulation: readonly Finding[];
    readonly dropout: readonly Finding[];
  };
}

export const curveSeen = oncePerEvidence(curveOf);

function curveOf(evidence: Evidence): CurveSeen {
  const held = heldPoints(evidence.steps);
  const unsteady = steadinessFindings(evidence, held);
  const edge = numberNamed(unsteady, 'unsteady-above-current') ?? Number.POSITIVE_INFINITY;
  const steady = held.filter((point) => point.current < edge);
  const cold = coldPoints(steady);
  const knee = findKnee(cold);
  const ramp = new Set(stepsOf(evidence, 'load-ramp').map((step) => step.step));
  const regulated = steady.filter(
    (point) => ramp.has(point.step) && point.current < (knee?.breakpoint ?? Number.POSITIVE_INFINITY),
  );
  const idle = openCircuitFindings(evidence);
  const line = regulationLine(evidence.header, regulated);
  const regulation = regulationFindings(evidence, regulated, line, idle.length > 0);
  const droop = numberNamed(regulation, 'droop-resistance');
  const bracket = dropoutBracket(evidence);
  const dropout = dropoutFindings(evidence, bracket, {
    held: steady,
    resistance: knee === undefined ? droop : -knee.right.slope,
  });
  const openCircuit = numberNamed([...idle, ...regulation], 'open-circuit-voltage');
  const trace = limitTraceOf(evidence, { openCircuit, droop });
  return {
    ...{ held, steady, cold, knee, regulated, line, bracket, trace, openCircuit, droop },
    beyondKnee: knee === undefined ? [] : lineBeyond(knee, cold),
    findings: { idle, unsteady, regulation, dropout },
  };
}

function lineBeyond(knee: BrokenLineFit, cold: readonly CurvePoint[]): readonly Place[] {
  const last = cold.at(-1)?.current ?? knee.breakpoint;
  return [
    { current: knee.breakpoint, voltage: knee.valueAtBreak },
    { current: last, voltage: predictBrokenLine(knee, last) },
  ];
}
