import { guard, valueOf } from '../bench/guards.js';
import type { Taken } from '../bench/sample.js';
import type { Amperes, Seconds, Volts } from '../quantity/quantity.js';
import type { Phase, PointOutcome } from '../record/journal-event.js';
import type { StepContext } from './step-kind.js';

/** What one sample says of the module, as far as a step must know it to go on. */
export interface Seen {
  readonly t: Seconds;
  /** At the module; not a number when it could not be read. */
  readonly voltage: Volts;
  readonly current: Amperes;
}

export interface PointPlan {
  readonly phase: Phase;
  readonly set: { readonly current?: Amperes };
  /** Wait between the set-point and the first reading. */
  readonly dwell: Seconds;
  readonly readings: number;
  /** Wait between two readings; short and uneven when left out. */
  readonly every?: Seconds;
  /** What each sample says of the module. */
  readonly judge: (seen: Seen) => PointOutcome;
  /** Whether the point ends with this sample. When left out, a dropout ends it at once, to spare the module. */
  readonly until?: (seen: Seen, outcome: PointOutcome) => boolean;
}

export interface PointSeen {
  readonly outcome: PointOutcome;
  readonly samples: readonly Seen[];
}

const longestStagger: Seconds = 0.02;
const goldenShare = (Math.sqrt(5) - 1) / 2;

/**
 * An uneven wait before a reading. Taken at even distances, the readings of an output that swings in the same
 * time are all alike, and a module that oscillates looks steady. Multiples of the golden section spread the
 * waits as evenly as can be, and are the same in every run.
 */
function stagger(sample: number): Seconds {
  return ((sample * goldenShare) % 1) * longestStagger;
}

/** The points of one step, numbered as they are taken. */
export class Points {
  readonly #context: StepContext;
  #count = 0;

  constructor(context: StepContext) {
    this.#context = context;
  }

  /**
   * One point: set, wait, read several times; everything is in the journal before the next thing happens,
   * and every sample has passed the guards.
   */
  async take(plan: PointPlan): Promise<PointSeen> {
    const { bench, journal, clock, signal, step } = this.#context;
    signal.throwIfAborted();
    this.#count += 1;
    const point = this.#count;
    journal.append({ event: 'point-began', step, point, phase: plan.phase, set: plan.set });
    if (plan.set.current !== undefined) await bench.load.setCurrent(plan.set.current);
    const settling = bench.instruments.map(({ driver }) => driver.settling);
    await clock.sleep(Math.max(plan.dwell, ...settling), signal);
    const ends = plan.until ?? ((_seen, judged) => judged === 'dropped');
    const samples: Seen[] = [];
    let outcome: PointOutcome = 'measured';
    for (let sample = 1; sample <= plan.readings; sample += 1) {
      if (sample > 1) await clock.sleep(plan.every ?? stagger(sample), signal);
      const seen = await this.#sample(point, sample, plan.set.current);
      samples.push(seen);
      outcome = plan.judge(seen);
      if (ends(seen, outcome)) break;
    }
    journal.append({ event: 'point-ended', step, point, outcome });
    return { outcome, samples };
  }

  async #sample(point: number, sample: number, setCurrent: Amperes | undefined): Promise<Seen> {
    const { bench, journal, clock, signal, limits, step, show } = this.#context;
    signal.throwIfAborted();
    const taken = await bench.sample(({ of, what, measurement }) => {
      const read =
        measurement.kind === 'value'
          ? { value: measurement.value }
          : { value: null, problem: measurement.kind };
      journal.append({ event: 'reading', step, point, sample, of, what, ...read });
    });
    guard(taken, limits);
    const seen = {
      t: clock.now(),
      voltage: moduleVoltage(this.#context, taken),
      current: valueOf(taken, 'load', 'current'),
    };
    show({
      ...(setCurrent === undefined ? {} : { setCurrent }),
      voltage: seen.voltage,
      current: seen.current,
    });
    return seen;
  }
}

/** The meter's voltage where there is one; otherwise the load's, and what the leads lose. */
export function moduleVoltage({ bench }: StepContext, taken: readonly Taken[]): Volts {
  if (bench.description.voltageFrom === 'meter-at-module') return valueOf(taken, 'meter', 'voltage');
  const current = valueOf(taken, 'load', 'current');
  return valueOf(taken, 'load', 'voltage') + current * bench.description.leads.resistance;
}

/** The last digit of the instrument that `moduleVoltage` comes from; 0 when its driver does not say. */
export function voltageResolution({ bench }: StepContext): Volts {
  const instrument =
    bench.description.voltageFrom === 'meter-at-module' ? bench.meter : bench.load.instrument;
  return instrument?.driver.accuracy['voltage']?.resolution ?? 0;
}
