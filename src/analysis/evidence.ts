import type { Amperes, Seconds, Volts } from '../quantity/quantity.js';
import type {
  Answered,
  Ended,
  GuardTripped,
  PointBegan,
  PointOutcome,
  ReadingTaken,
  Recovery,
  Resumed,
  TimedEvent,
} from '../record/journal-event.js';
import type { RunHeader } from '../record/run-header.js';
import { momentsAt, RunningMoments } from '../statistics/running-moments.js';

/** What a journal amounts to: its points, each boiled down to a few numbers, however many readings it had. */
export interface Evidence {
  readonly header: RunHeader;
  readonly steps: readonly StepEvidence[];
  /** Undefined when the record was cut off. */
  readonly ended: Ended | undefined;
  readonly tripped: GuardTripped | undefined;
  readonly readings: number;
  /** The last that was heard of the load's input; undefined when nothing was. */
  readonly input: 'on' | 'off' | undefined;
  /** The runs that the first steps were taken over from, the first of them first. */
  readonly resumed: readonly Resumed[];
  /** How many steps, from the first, a run that goes on would take over. */
  readonly stepsDone: number;
}

export interface StepEvidence {
  readonly step: number;
  readonly kind: string;
  readonly settings: Readonly<Record<string, unknown>>;
  readonly points: readonly PointEvidence[];
  readonly recoveries: readonly Recovery[];
  readonly answers: readonly Answered[];
}

export interface PointEvidence {
  readonly point: number;
  readonly phase: PointBegan['phase'];
  readonly set: PointBegan['set'];
  readonly t: Seconds;
  /** Undefined when the record was cut off in the middle of it. */
  readonly outcome: PointOutcome | undefined;
  readonly moduleVoltage: RunningMoments;
  /** Which instrument `moduleVoltage` was read by: the load where the meter's probes were elsewhere. */
  readonly voltageBy: 'meter' | 'load';
  readonly loadVoltage: RunningMoments;
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

/** Takes the events of a journal one after the other; memory grows with the points, not with the readings. */
export class EvidenceCollector {
  readonly #header: RunHeader;
  readonly #steps: Growing<StepEvidence>[] = [];
  #point: Growing<PointEvidence> | undefined;
  #loadVoltage = Number.NaN;
  /** Undefined where the meter's probes were elsewhere; not a number where it had no value. */
  #meterVoltage: Volts | undefined;
  #ended: Ended | undefined;
  #tripped: GuardTripped | undefined;
  #readings = 0;
  #input: 'on' | 'off' | undefined;
  readonly #resumed: Resumed[] = [];
  #stepsDone = 0;

  constructor(header: RunHeader) {
    this.#header = header;
  }

  add(event: TimedEvent): void {
    const step = this.#steps.at(-1);
    switch (event.event) {
      case 'reading':
        this.#addReading(event);
        return;
      case 'step-began': {
        const settings = this.#header.steps[event.step - 1]?.settings ?? {};
        this.#steps.push({
          step: event.step,
          kind: event.kind,
          settings,
          points: [],
          recoveries: [],
          answers: [],
        });
        return;
      }
      case 'point-began':
        this.#point = newPoint(event, event.t);
        this.#forgetSample();
        step?.points.push(this.#point);
        return;
      case 'point-ended':
        // Taken again; what was read before the connection was lost counts for nothing.
        if (event.outcome === 'interrupted') step?.points.pop();
        else if (this.#point) this.#point.outcome = event.outcome;
        this.#point = undefined;
        return;
      case 'recovery':
        step?.recoveries.push(event);
        return;
      case 'answer':
        step?.answers.push(event);
        return;
      case 'guard-tripped':
        this.#tripped ??= event;
        return;
      case 'input':
        this.#input = event.confirmed ? event.state : 'on';
        return;
      case 'ended':
        this.#ended = event;
        return;
      case 'resumed':
        this.#resumed.push(event);
        return;
      case 'step-ended':
        if (event.carried !== undefined && event.step === this.#stepsDone + 1) this.#stepsDone += 1;
        return;
      case 'opened':
      case 'instrument':
      case 'caution':
      case 'prompt':
      case 'notice':
        return;
    }
  }

  result(): Evidence {
    return {
      header: this.#header,
      steps: this.#steps,
      ended: this.#ended,
      tripped: this.#tripped,
      readings: this.#readings,
      input: this.#input,
      resumed: this.#resumed,
      stepsDone: this.#stepsDone,
    };
  }

  /** The load's current comes last in a sample, so the sample is whole when it is there. */
  #addReading({ of, what, at, value, problem }: ReadingTaken): void {
    this.#readings += 1;
    const point = this.#point;
    if (point === undefined) return;
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
    if (of === 'meter' && what === 'voltage') this.#meterVoltage = number;
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
    const { leads } = this.#header.bench;
    return this.#meterVoltage !== undefined && this.#isMetered()
      ? this.#meterVoltage
      : this.#loadVoltage + current * leads.resistance;
  }

  #isMetered(): boolean {
    return this.#header.bench.voltageFrom === 'meter-at-module' && this.#meterVoltage !== undefined;
  }
}

function addIfValue(moments: RunningMoments, value: number): void {
  if (!Number.isNaN(value)) moments.add(value);
}

function newPoint({ point, phase, set, of }: PointBegan, t: Seconds): Growing<PointEvidence> {
  return {
    point,
    phase,
    set,
    t,
    outcome: undefined,
    moduleVoltage: new RunningMoments(),
    voltageBy: 'meter',
    loadVoltage: new RunningMoments(),
    current: new RunningMoments(),
    taps: new Map(),
    temperature: new RunningMoments(),
    resistance: { values: new RunningMoments(), open: 0 },
    of,
    samples: [],
  };
}
