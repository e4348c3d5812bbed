import { settlingOf } from '../files/driver.js';
import { BlindSamples } from '../bench/guards.js';
import type { OpenBench } from '../bench/open-bench.js';
import type { Taken } from '../bench/sample.js';
import { WrongPlaceError } from '../bench/wrong-place-error.js';
import type { OhmReadings } from '../circuit/ohm-readings.js';
import type { Seconds, Volts } from '../quantity/quantity.js';
import type { Phase } from '../record/journal-event.js';
import { RunningMoments } from '../statistics/running-moments.js';
import { asRead } from './as-read.js';
import type { StepContext } from './step-kind.js';
import { uninterrupted } from './uninterrupted.js';

type Meter = NonNullable<OpenBench['meter']>;

const lookEvery: Seconds = 0.5;

export interface MeterPointPlan {
  readonly phase: Phase;
  /** The module that the point is about. */
  readonly of?: string;
  /** Wait before the first reading. */
  readonly dwell: Seconds;
  readonly readings: number;
}

/** What is made of the readings of one point. */
interface Look<Seen> {
  readonly enough: (value: number, samples: number) => boolean;
  readonly seen: () => Seen;
}

/** Points at which the meter alone is read: nothing is set, and whatever the load is connected to is off. */
export class MeterPoints {
  readonly #context: StepContext;
  readonly #meter: Meter;
  readonly #blind = new BlindSamples();
  #count = 0;

  constructor(context: StepContext, meter: Meter) {
    this.#context = context;
    this.#meter = meter;
  }

  /** Puts the meter in that mode, and asks it whether it is, where it can tell. @throws WrongPlaceError */
  async measure(what: 'voltage' | 'resistance'): Promise<void> {
    await this.#meter.perform(`measure-${what}`);
    if (!this.#meter.reads(`measures-${what}`) || (await this.#meter.flag(`measures-${what}`))) return;
    throw new WrongPlaceError(
      'meter-in-wrong-mode',
      `the meter at ${this.#meter.address} was told to measure ${what} and says that it does not`,
      'somebody at its panel, or a driver that is not for it: `railproof drivers --try` shows what it makes of it',
    );
  }

  /** Several readings of a voltage, as they are. */
  async voltage(plan: MeterPointPlan): Promise<RunningMoments> {
    return this.#take(plan, 'voltage', plan.dwell, () => {
      const values = new RunningMoments();
      return {
        enough: (volts, samples) => {
          values.add(volts);
          return samples >= plan.readings;
        },
        seen: () => values,
      };
    });
  }

  /** Looks until the voltage is `below`, or `wait` is over. @returns what was read last */
  async voltageFalls(plan: Omit<MeterPointPlan, 'readings'>, below: Volts, wait: Seconds): Promise<Volts> {
    const end = this.#context.clock.now() + wait;
    return this.#take(plan, 'voltage', lookEvery, () => {
      let last = Number.NaN;
      return {
        enough: (volts) => {
          last = volts;
          return Math.abs(volts) < below || this.#context.clock.now() >= end;
        },
        seen: () => last,
      };
    });
  }

  /** Several readings of a resistance; an open circuit is one too. */
  async resistance(plan: MeterPointPlan): Promise<OhmReadings> {
    return this.#take(plan, 'resistance', 0, () => {
      const values = new RunningMoments();
      let open = 0;
      return {
        enough: (ohms, samples) => {
          if (ohms === Number.POSITIVE_INFINITY) open += 1;
          else values.add(ohms);
          return samples >= plan.readings;
        },
        seen: () => ({ values, open }),
      };
    });
  }

  /**
   * Readings until `enough` of them; one without a value is none, and too many such in a row end it. A point that
   * is interrupted is taken again with a look of its own.
   */
  #take<Seen>(
    plan: Omit<MeterPointPlan, 'readings'>,
    what: 'voltage' | 'resistance',
    every: Seconds,
    look: () => Look<Seen>,
  ): Promise<Seen> {
    return uninterrupted(this.#context, async () => {
      const { enough, seen } = look();
      const outcome = await this.#takeOnce(plan, what, every, enough);
      return outcome === 'interrupted' ? outcome : seen();
    });
  }

  async #takeOnce(
    { phase, of, dwell }: Omit<MeterPointPlan, 'readings'>,
    what: 'voltage' | 'resistance',
    every: Seconds,
    enough: Look<unknown>['enough'],
  ): Promise<'measured' | 'interrupted'> {
    const { bench, journal, clock, signal, step } = this.#context;
    const { gaps } = bench;
    const end = (outcome: 'measured' | 'interrupted'): typeof outcome => {
      journal.append({ event: 'point-ended', step, point, outcome });
      return outcome;
    };
    signal.throwIfAborted();
    this.#count += 1;
    const point = this.#count;
    const about = of === undefined ? {} : { of };
    journal.append({ event: 'point-began', step, point, phase, set: {}, ...about });
    await clock.sleep(Math.max(dwell, settlingOf(this.#meter.driver)), signal);
    let seen = 0;
    for (let sample = 1; ; sample += 1) {
      if (sample > 1) await clock.sleep(every, signal);
      const value = await this.#read(point, sample, what);
      if (bench.gaps !== gaps) return end('interrupted');
      this.#blind.count(Number.isNaN(value) ? what : undefined);
      if (Number.isNaN(value)) continue;
      seen += 1;
      if (enough(value, seen)) return end('measured');
    }
  }

  /** Infinity for an open circuit, not a number where the meter has none. */
  async #read(point: number, sample: number, what: 'voltage' | 'resistance'): Promise<number> {
    const { bench, journal, signal, guards, step, show } = this.#context;
    signal.throwIfAborted();
    const at = bench.places.movedAt;
    const where = at === undefined ? {} : { at };
    const taken: Taken = { of: 'meter', what, ...where, measurement: await this.#meter.read(what) };
    journal.append({ event: 'reading', step, point, sample, ...asRead(taken) });
    guards.look([taken], {});
    const value = numberIn(taken.measurement);
    if (what === 'voltage') show({ voltage: value });
    return value;
  }
}

function numberIn(measurement: Taken['measurement']): number {
  switch (measurement.kind) {
    case 'value':
      return measurement.value;
    case 'overload':
      return Number.POSITIVE_INFINITY;
    case 'not-a-number':
      return Number.NaN;
  }
}
