import { formatQuantity } from '../quantity/format-quantity.js';
import type { Volts } from '../quantity/quantity.js';
import { studentTDistribution } from '../statistics/student-t.js';
import { stepsOf } from './curve.js';
import type { Evidence, PointEvidence } from './evidence.js';
import { type Finding, measured } from './finding.js';
import { evenly } from './pooled-points.js';
import { moduleVoltageErrors, promised } from './promised-errors.js';
import { soundLine } from './sound-line.js';

/**
 * The open-circuit voltage: the mean of the idle points, with the spread between points as Type A and the
 * instrument's promise as Type B. A drift that can't be chance is told in the note.
 */
export function openCircuitFindings(evidence: Evidence): readonly Finding[] {
  const step = stepsOf(evidence, 'open-circuit').at(0);
  const points = evenly((step?.points ?? []).filter((point) => point.moduleVoltage.count > 0));
  if (step === undefined || points.length === 0) return [];
  const voltage = points.reduce((sum, point) => sum + point.moduleVoltage.mean, 0) / points.length;
  const { instrument } = moduleVoltageErrors(evidence.header);
  return [
    measured(
      'open-circuit-voltage',
      'voltage',
      voltage,
      [
        spread(points, voltage),
        promised(`${instrument.of}, gain`, instrument.gain * voltage),
        promised(`${instrument.of}, offset`, instrument.offset),
        promised(`${instrument.of}, resolution`, instrument.resolution),
      ],
      { step: step.step, note: driftNote(points, 2 * Math.sqrt(3) * instrument.resolution) },
    ),
  ];
}

function spread(points: readonly PointEvidence[], mean: number): Finding['budget'][number] {
  const name = 'spread of the readings';
  const only = points[0]?.moduleVoltage;
  if (points.length === 1 && only !== undefined) {
    return {
      name,
      kind: 'A',
      uncertainty: only.uncertaintyOfMean ?? 0,
      degreesOfFreedom: Math.max(1, only.count - 1),
    };
  }
  const squares = points.reduce((sum, point) => sum + (point.moduleVoltage.mean - mean) ** 2, 0);
  const degreesOfFreedom = points.length - 1;
  return {
    name,
    kind: 'A',
    uncertainty: Math.sqrt(squares / degreesOfFreedom / points.length),
    degreesOfFreedom,
  };
}

/** A drift that chance gives less often than this is told, if it moved more than the meter's last digit. */
const strictLevel = 1e-3;

function driftNote(points: readonly PointEvidence[], resolution: Volts): string {
  if (points.length < 4) return '';
  const times = points.map((point) => point.t);
  const duration = (times.at(-1) ?? 0) - (times[0] ?? 0);
  const fit = soundLine(
    times,
    points.map((point) => point.moduleVoltage.mean),
  );
  if (fit === undefined || Math.abs(fit.slope) * duration <= resolution) return '';
  const chance =
    fit.slopeUncertainty === 0
      ? 0
      : 2 * studentTDistribution(-Math.abs(fit.slope / fit.slopeUncertainty), fit.degreesOfFreedom);
  return chance < strictLevel
    ? `drifted by ${formatQuantity(fit.slope * duration, 'voltage', { significant: 2 })} in ${formatQuantity(duration, 'time', { significant: 2 })}`
    : '';
}
