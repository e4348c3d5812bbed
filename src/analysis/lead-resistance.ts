import type { Evidence, PointEvidence } from './evidence.js';
import { type Finding, measured } from './finding.js';
import { lineOverCurrent } from './sound-line.js';
import { promised, promisedErrors } from './promised-errors.js';
import { stepsOf } from './curve.js';

/**
 * `lead-resistance`: the slope of (voltage at the module − voltage at the load) over the current, so that
 * the offset between the two instruments falls out. Only where a meter sits at the module. A gain error
 * scales what its own instrument read: the meter's the droop of the module, the load's that and the leads.
 */
export function leadFindings(evidence: Evidence): readonly Finding[] {
  const { header } = evidence;
  const step = stepsOf(evidence, 'load-ramp').at(0);
  if (header.bench.voltageFrom !== 'meter-at-module' || step === undefined) return [];
  const points = step.points.filter(isWhole);
  const currents = points.map((point) => point.current.mean);
  const fit = lineOverCurrent(
    currents,
    points.map((point) => point.moduleVoltage.mean - point.loadVoltage.mean),
  );
  const atModule = lineOverCurrent(
    currents,
    points.map((point) => point.moduleVoltage.mean),
  );
  if (fit === undefined || atModule === undefined) return [];
  const meter = promisedErrors(header, 'meter', 'voltage');
  const load = promisedErrors(header, 'load', 'voltage');
  const current = promisedErrors(header, 'load', 'current');
  const resolution = Math.hypot(meter.resolution, load.resolution);
  const { resistance, uncertainty } = header.bench.leads;
  const finding = measured(
    'lead-resistance',
    'resistance',
    fit.slope,
    [
      {
        name: 'scatter about the line',
        kind: 'A',
        uncertainty: Math.max(fit.residualDeviation, resolution) / Math.sqrt(fit.spreadX),
        degreesOfFreedom: fit.degreesOfFreedom,
      },
      promised(`${load.of}, gain`, load.gain * (atModule.slope - fit.slope)),
      promised(`${meter.of}, gain`, meter.gain * atModule.slope),
      promised(`${current.of}, gain`, current.gain * fit.slope),
    ],
    { step: step.step },
  );
  const low = finding.interval?.[0] ?? Number.NEGATIVE_INFINITY;
  const given = resistance > 0 || uncertainty > 0;
  const worse = given && low > resistance + uncertainty;
  return [
    worse ? { ...finding, note: 'more than the bench file says: look for a loose or burnt joint' } : finding,
  ];
}

function isWhole(point: PointEvidence): boolean {
  return (
    point.outcome === 'held' &&
    point.moduleVoltage.count > 0 &&
    point.loadVoltage.count > 0 &&
    point.current.count > 0
  );
}
