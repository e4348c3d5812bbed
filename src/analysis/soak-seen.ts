import type { Amperes, Celsius, Kelvins, Seconds, Volts } from '../quantity/quantity.js';
import { RunningMoments } from '../statistics/running-moments.js';
import { stepsOf } from './curve.js';
import type { Evidence, PointEvidence, StepEvidence } from './evidence.js';
import { settledTemperature, type SettledTemperature } from './settled-temperature.js';

/** A soak, as its record shows it. */
export interface SoakSeen {
  readonly step: number;
  /** That flowed, on average. */
  readonly current: Amperes;
  /** Of the looks at which the module held the current. */
  readonly looks: readonly { readonly t: Seconds; readonly voltage: Volts }[];
  /** Where a thermometer read something; in the order of time. */
  readonly temperatures: readonly Celsius[];
  /** When each of these was read. */
  readonly times: readonly Seconds[];
  /** Before anything flowed. */
  readonly start: Start | undefined;
  readonly settling: SettledTemperature | undefined;
  /** The step's own limit of temperature. */
  readonly limit: Celsius | undefined;
  /** The time over which it was watched for change. */
  readonly over: Seconds;
}

export interface Start {
  readonly mean: Celsius;
  readonly uncertainty: Kelvins;
  readonly degreesOfFreedom: number;
}

/** The step's own default, for a record that does not say. */
const usualWindow: Seconds = 600;

/** Every soak of a record that held its current for a look at least. */
export function soaksSeen(evidence: Evidence): readonly SoakSeen[] {
  return stepsOf(evidence, 'soak').flatMap((step) => {
    const held = step.points.filter(
      ({ phase, outcome, moduleVoltage, current }) =>
        phase === 'soak' && outcome === 'held' && moduleVoltage.count > 0 && current.count > 0,
    );
    return held.length === 0 ? [] : [soakSeen(step, held)];
  });
}

function soakSeen({ step, settings, points }: StepEvidence, held: readonly PointEvidence[]): SoakSeen {
  const current = new RunningMoments();
  for (const point of held) current.add(point.current.mean);
  const warm = held.filter(({ temperature }) => temperature.count > 0);
  const temperatures = warm.map(({ temperature }) => temperature.mean);
  const times = warm.map(({ t }) => t);
  const over = numberAt(settings, 'over') ?? usualWindow;
  return {
    step,
    current: current.mean,
    looks: held.map(({ t, moduleVoltage }) => ({ t, voltage: moduleVoltage.mean })),
    temperatures,
    times,
    start: startOf(points),
    settling: temperatures.length === 0 ? undefined : settledTemperature(times, temperatures, over),
    limit: numberAt(settings, 'limit'),
    over,
  };
}

/** Of the looks with the input off, before the first under load. */
function startOf(points: readonly PointEvidence[]): Start | undefined {
  const first = points.findIndex(({ phase }) => phase === 'soak');
  const cold = new RunningMoments();
  for (const { phase, temperature } of points.slice(0, Math.max(0, first))) {
    if (phase === 'idle' && temperature.count > 0) cold.add(temperature.mean);
  }
  if (cold.count === 0) return undefined;
  return {
    mean: cold.mean,
    uncertainty: cold.uncertaintyOfMean ?? 0,
    degreesOfFreedom: Math.max(1, cold.count - 1),
  };
}

function numberAt(settings: StepEvidence['settings'], name: string): number | undefined {
  const value = settings[name];
  return typeof value === 'number' ? value : undefined;
}
