import type { Amperes, Celsius, Kelvins, Seconds, Volts } from '../quantity/quantity.js';
import { RunningMoments } from '../statistics/running-moments.js';
import { stepsOf } from './curve.js';
import type { Evidence, PointEvidence, StepEvidence } from './evidence.js';
import type { Reach } from './point-evidence.js';
import { evenly, mostLooks, taken } from './pooled-points.js';
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
  /** How many neighbouring looks are one, of those that are older than the last hour; 1 in any but a long soak. */
  readonly each: number;
  readonly read: { readonly voltages: Read; readonly temperatures: Read };
}

/** What is there to be drawn. */
export interface Read {
  /** In how many looks. */
  readonly all: number;
  /** Of each look; where several are one the lowest and the highest of them, so that none is hidden by the others. */
  readonly values: readonly { readonly t: Seconds; readonly value: number }[];
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
  for (const point of evenly(held)) current.add(point.current.mean);
  const warm = held.filter(({ temperature }) => temperature.count > 0);
  const over = numberAt(settings, 'over') ?? usualWindow;
  return {
    step,
    current: current.mean,
    looks: held.map(({ t, moduleVoltage }) => ({ t, voltage: moduleVoltage.mean })),
    temperatures: temperaturesOf(warm),
    times: timesOf(warm),
    start: startOf(points),
    settling: settlingOf(evenly(warm), over),
    limit: numberAt(settings, 'limit'),
    over,
    each: mostLooks(held),
    read: { voltages: readOf(held, 'moduleVoltage'), temperatures: readOf(warm, 'temperature') },
  };
}

function settlingOf(warm: readonly PointEvidence[], over: Seconds): SettledTemperature | undefined {
  return warm.length === 0 ? undefined : settledTemperature(timesOf(warm), temperaturesOf(warm), over);
}

function temperaturesOf(points: readonly PointEvidence[]): readonly Celsius[] {
  return points.map(({ temperature }) => temperature.mean);
}

function timesOf(points: readonly PointEvidence[]): readonly Seconds[] {
  return points.map(({ t }) => t);
}

function readOf(points: readonly PointEvidence[], what: keyof Reach): Read {
  return {
    all: taken(points),
    values: points.flatMap((point) =>
      (point.reach?.[what] ?? [point[what].mean]).map((value) => ({ t: point.t, value })),
    ),
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
