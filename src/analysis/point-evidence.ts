import type { Amperes, Celsius, Seconds, Volts } from '../quantity/quantity.js';
import type { PointBegan, PointOutcome, ReadingTaken } from '../record/journal-event.js';
import type { RunHeader } from '../record/run-header.js';
import { momentsAt, RunningMoments } from '../statistics/running-moments.js';

/** One point, boiled down to a few numbers; of a long row of looks at the same, several neighbours as one. */
export interface PointEvidence {
  /** Its number in the step; of several the first one's. */
  readonly point: number;
  /** How many neighbours it stands for: 1, but in a row that is longer than what is kept of it look by look. */
  readonly looks: number;
  /** Of several, what the looks among them reached that were furthest from the rest; undefined for one. */
  readonly reach: Reach | undefined;
  readonly phase: PointBegan['phase'];
  readonly set: PointBegan['set'];
  /** When it began; of several the mean of that. */
  readonly t: Seconds;
  /** Undefined when the record was cut off in the middle of it. */
  readonly outcome: PointOutcome | undefined;
  readonly moduleVoltage: RunningMoments;
  /** Which instrument `moduleVoltage` was read by: the load where the meter's probes were elsewhere. */
  readonly voltageBy: 'meter' | 'load';
  readonly loadVoltage: RunningMoments;
  /** Also where the load was not asked: by it an unplugged output was shown to be dead. */
  readonly meterVoltage: RunningMoments;
  readonly current: RunningMoments;
  /** Of what was read elsewhere than at the usual place, by where: `ballast-of-K1`. */
  readonly taps: ReadonlyMap<string, RunningMoments>;
  readonly temperature: RunningMoments;
  /** Of an ohmmeter; `open` counts the times it showed overload, which is how an open circuit reads. */
  readonly resistance: { readonly values: RunningMoments; readonly open: number };
  /** The module that the point is about, where it is about one of several. */
  readonly of: string | undefined;
  /** Of an overload and of a trace, the first samples one by one: an average would hide how the module limits. */
  readonly samples: readonly { readonly voltage: Volts; readonly current: Amperes }[];
}

/** The lowest and the highest mean of a look; not a number where none read it. */
export interface Reach {
  readonly moduleVoltage: readonly [low: Volts, high: Volts];
  readonly temperature: readonly [low: Celsius, high: Celsius];
}

type Growing<T> = {
  -readonly [Key in keyof T]: T[Key] extends readonly (infer Item)[]
    ? Item[]
    : T[Key] extends ReadonlyMap<infer Name, infer Value>
      ? Map<Name, Value>
      : T[Key];
};

const mostSamples = 500;
/** A journal made elsewhere may hold this and more: it is overload or no number, and never a value (SCPI-99). */
const overload = 9.9e37;

/** Boils the readings of one point down as they come: its memory does not grow with them. */
export class PointCollector {
  /** What came together so far. */
  readonly point: Growing<PointEvidence>;
  readonly #bench: Pick<RunHeader['bench'], 'leads' | 'voltageFrom'>;
  #loadVoltage = Number.NaN;
  /** Undefined where the meter's probes were elsewhere; not a number where it had no value. */
  #meterVoltage: Volts | undefined;

  constructor(bench: Pick<RunHeader['bench'], 'leads' | 'voltageFrom'>, began: PointBegan, t: Seconds) {
    this.#bench = bench;
    this.point = newPoint(began, t);
  }

  /** The load's current comes last in a sample, so the sample is whole when it is there. */
  add({ of, what, at, value, problem }: ReadingTaken): void {
    const { point } = this;
    const number = value !== null && Math.abs(value) < overload ? value : Number.NaN;
    if (what === 'resistance') {
      const { values, open } = point.resistance;
      addIfValue(values, number);
      if (problem === 'overload') point.resistance = { values, open: open + 1 };
      return;
    }
    if (of === 'thermometer' && what === 'temperature') addIfValue(point.temperature, number);
    if (at !== undefined) {
      addIfValue(momentsAt(point.taps, at), number);
      return;
    }
    if (of === 'meter' && what === 'voltage') {
      this.#meterVoltage = number;
      addIfValue(point.meterVoltage, number);
    }
    if (of === 'load' && what === 'voltage') this.#loadVoltage = number;
    if (of !== 'load' || what !== 'current') return;
    const voltage = this.#moduleVoltage(number);
    addIfValue(point.moduleVoltage, voltage);
    point.voltageBy = this.#isMetered() ? 'meter' : 'load';
    addIfValue(point.loadVoltage, this.#loadVoltage);
    addIfValue(point.current, number);
    if ((point.phase === 'overload' || point.phase === 'trace') && point.samples.length < mostSamples) {
      point.samples.push({ voltage, current: number });
    }
    this.#forgetSample();
  }

  #forgetSample(): void {
    this.#loadVoltage = Number.NaN;
    this.#meterVoltage = undefined;
  }

  #moduleVoltage(current: Amperes): Volts {
    const { leads } = this.#bench;
    return this.#meterVoltage !== undefined && this.#isMetered()
      ? this.#meterVoltage
      : this.#loadVoltage + current * leads.resistance;
  }

  #isMetered(): boolean {
    return this.#bench.voltageFrom === 'meter-at-module' && this.#meterVoltage !== undefined;
  }
}

function addIfValue(moments: RunningMoments, value: number): void {
  if (!Number.isNaN(value)) moments.add(value);
}

function newPoint({ point, phase, set, of }: PointBegan, t: Seconds): Growing<PointEvidence> {
  return {
    point,
    looks: 1,
    reach: undefined,
    phase,
    set,
    t,
    outcome: undefined,
    moduleVoltage: new RunningMoments(),
    voltageBy: 'meter',
    loadVoltage: new RunningMoments(),
    meterVoltage: new RunningMoments(),
    current: new RunningMoments(),
    taps: new Map(),
    temperature: new RunningMoments(),
    resistance: { values: new RunningMoments(), open: 0 },
    of,
    samples: [],
  };
}
