import { settlingOf } from '../files/driver.js';
import { LoadSwitchedOffError } from '../bench/bench-error.js';
import { BlindSamples, valueOf } from '../bench/guards.js';
import { moduleVoltage } from '../bench/module-voltage.js';
import type { SampleWanted, Taken } from '../bench/sample.js';
import type { Amperes, Celsius, Seconds, Volts } from '../quantity/quantity.js';
import type { Phase, PointOutcome, SetPoint } from '../record/journal-event.js';
import { momentsAt, RunningMoments } from '../statistics/running-moments.js';
import { asRead } from './as-read.js';
import { flows, isGone } from './holding.js';
import { openCircuitVoltage } from './known-voltage.js';
import type { StepContext } from './step-kind.js';
import { uninterrupted } from './uninterrupted.js';

/** What one sample says of the module, as far as a step must know it to go on. */
export interface Seen {
  readonly t: Seconds;
  /** At the module. */
  readonly voltage: Volts;
  /** Not a number when it could not be read, which is let pass while the load's input is off. */
  readonly current: Amperes;
  /** The voltages read elsewhere than at the usual place, by where. Those that could not be read are not there. */
  readonly taps: ReadonlyMap<string, Volts>;
  readonly temperature: Celsius | undefined;
}

export interface PointPlan {
  readonly phase: Phase;
  /** With a current or a voltage, the load's input is on and in that mode. */
  readonly set: SetPoint;
  /** The module that the point is about, where it is about one of several. */
  readonly of?: string;
  /** What each sample holds besides voltage and current. */
  readonly wanted?: SampleWanted;
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

/** What a point amounts to; its readings are in the journal and are not kept here. */
export interface PointSeen {
  readonly outcome: PointOutcome;
  /** Of the module's voltage. */
  readonly voltage: RunningMoments;
  readonly current: RunningMoments;
  /** Of what was read elsewhere, by where. */
  readonly taps: ReadonlyMap<string, RunningMoments>;
  /** The last that was read. */
  readonly temperature: Celsius | undefined;
  /** Of the last sample, and of the one before where there was one. */
  readonly last: Seconds;
  readonly before: Seconds | undefined;
  /** At the end of it: `let-go` when the load switched its input off as the module's voltage went. */
  readonly load: 'as-told' | 'let-go';
}

/**
 * A load that is on, has the module's voltage and yet does not take its current contradicts itself: the output
 * went just then, or the reading is an old one. So many looks in a row tell, and the guards see them all.
 */
const mostOdd = 3;

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
  readonly #openCircuit: Volts;
  readonly #blind = new BlindSamples();
  #count = 0;

  constructor(context: StepContext) {
    this.#context = context;
    this.#openCircuit = openCircuitVoltage(context);
  }

  /**
   * One point: set, wait, read several times; everything is in the journal before the next thing happens,
   * and every sample has passed the guards. A sample in which the voltage, or the current while one flows,
   * could not be read is not judged, and the point ends with none such. One that is interrupted is taken again
   * from its set-point on; a plan that remembers what it saw is given as the making of it, so that each take
   * begins with a fresh one.
   * @throws LoadSwitchedOffError when the load's input is off and the module's voltage is there; the point
   * then ends without an outcome. The same when the source does not feed the module as it was told.
   * @throws UnsteadyLineError, SourceWentOffError, SourceSagsError
   */
  take(plan: PointPlan | (() => PointPlan)): Promise<PointSeen> {
    return uninterrupted(this.#context, () => this.#take(typeof plan === 'function' ? plan() : plan));
  }

  async #take(plan: PointPlan): Promise<PointSeen | 'interrupted'> {
    const { bench, journal, clock, signal, step } = this.#context;
    signal.throwIfAborted();
    this.#count += 1;
    const point = this.#count;
    const of = plan.of === undefined ? {} : { of: plan.of };
    journal.append({ event: 'point-began', step, point, phase: plan.phase, set: plan.set, ...of });
    if (plan.set.current !== undefined) await bench.load.setCurrent(plan.set.current, this.#openCircuit);
    if (plan.set.voltage !== undefined) await bench.load.setVoltage(plan.set.voltage);
    const { gaps } = bench;
    const isWhole = (): boolean => bench.gaps === gaps;
    const settling = bench.instruments.map(({ post, instrument }) =>
      post === 'source' ? 0 : settlingOf(instrument.driver),
    );
    await clock.sleep(Math.max(plan.dwell, ...settling), signal);
    const seen = await this.#see(plan, point, isWhole);
    const outcome = seen !== 'interrupted' && isWhole() ? seen.outcome : 'interrupted';
    journal.append({ event: 'point-ended', step, point, outcome });
    return outcome === 'interrupted' ? outcome : seen;
  }

  /** All that a point amounts to, as far as it is whole. */
  async #see(plan: PointPlan, point: number, isWhole: () => boolean): Promise<PointSeen | 'interrupted'> {
    const read = await this.#read(plan, point, isWhole);
    if (read === 'interrupted') return read;
    const { last, ...rest } = read;
    const load = await this.#loadAfter(plan.set, last);
    await this.#context.bench.source?.confirm();
    await this.#context.bench.places.confirm();
    return { last: last.t, load, ...rest };
  }

  /** Nothing is made of a sample that was taken across a gap, and of none that would follow it. */
  async #read(
    plan: PointPlan,
    point: number,
    isWhole: () => boolean,
  ): Promise<(Omit<PointSeen, 'last' | 'load'> & { readonly last: Seen }) | 'interrupted'> {
    const { bench, clock, signal } = this.#context;
    const { current: set } = plan.set;
    const ends = plan.until ?? ((_seen, judged) => judged === 'dropped');
    const voltage = new RunningMoments();
    const current = new RunningMoments();
    const taps = new Map<string, RunningMoments>();
    let temperature: Celsius | undefined;
    let last: Seen | undefined;
    let odds = 0;
    for (let sample = 1; ; sample += 1) {
      if (sample > 1) await clock.sleep(plan.every ?? stagger(sample), signal);
      const seen = await this.#sample(point, sample, plan);
      if (!isWhole()) return 'interrupted';
      const unread = unreadIn(seen, plan, bench);
      this.#blind.count(unread);
      if (unread !== undefined) continue;
      voltage.add(seen.voltage);
      if (!Number.isNaN(seen.current)) current.add(seen.current);
      for (const [at, volts] of seen.taps) momentsAt(taps, at).add(volts);
      temperature = seen.temperature ?? temperature;
      const outcome = plan.judge(seen);
      const idle = set !== undefined && !flows(set, seen.current);
      const odd = idle && !isGone(seen.voltage, this.#openCircuit);
      if (odd) await this.#loadAfter(plan.set, seen);
      odds = odd ? odds + 1 : 0;
      const before = last?.t;
      last = seen;
      const looksAgain = odds > 0 && odds < mostOdd;
      if (!looksAgain && (sample >= plan.readings || ends(seen, outcome))) {
        return { outcome, voltage, current, taps, temperature, before, last };
      }
    }
  }

  async #sample(point: number, sample: number, { set, wanted }: PointPlan): Promise<Seen> {
    const { bench, journal, clock, signal, guards, step, show } = this.#context;
    signal.throwIfAborted();
    const taken = await bench.sample((one) => {
      journal.append({ event: 'reading', step, point, sample, ...asRead(one) });
    }, wanted);
    guards.look(taken, set);
    const seen = {
      t: clock.now(),
      voltage: moduleVoltage(bench, taken),
      current: valueOf(taken, 'load', 'current'),
      taps: tapsIn(taken),
      temperature: temperatureIn(taken),
    };
    // Spreads last: V8 makes a hidden class for each name after one, each time, and keeps them for long.
    show({
      voltage: seen.voltage,
      current: seen.current,
      ...(set.current === undefined ? {} : { setCurrent: set.current }),
      ...(seen.temperature === undefined ? {} : { temperature: seen.temperature }),
    });
    return seen;
  }

  /** What has become of the load's input, which was on if anything was set. */
  async #loadAfter(set: SetPoint, { voltage }: Seen): Promise<PointSeen['load']> {
    if (set.current === undefined && set.voltage === undefined) return 'as-told';
    const { bench, journal, signal } = this.#context;
    signal.throwIfAborted();
    if (await bench.load.isOn()) return 'as-told';
    if (!isGone(voltage, this.#openCircuit)) throw new LoadSwitchedOffError(bench.load.address, set);
    journal.append({
      event: 'notice',
      text: "the module's voltage is gone and the load has switched its input off: taken for a dropout of the module",
    });
    return 'let-go';
  }
}

function tapsIn(taken: readonly Taken[]): ReadonlyMap<string, Volts> {
  return new Map(
    taken.flatMap(({ at, measurement }): [string, Volts][] =>
      at !== undefined && measurement.kind === 'value' ? [[at, measurement.value]] : [],
    ),
  );
}

function temperatureIn(taken: readonly Taken[]): Celsius | undefined {
  const celsius = valueOf(taken, 'thermometer', 'temperature');
  return Number.isNaN(celsius) ? undefined : celsius;
}

/**
 * With a voltage set the current is the module's doing, so it must be seen as well as one that was set; and a
 * temperature that is wanted guards the module.
 */
function unreadIn(
  { voltage, current, temperature }: Seen,
  { set, wanted }: PointPlan,
  { thermometer }: StepContext['bench'],
): 'voltage' | 'current' | 'temperature' | undefined {
  if (Number.isNaN(voltage)) return 'voltage';
  const flowing = set.current !== undefined || set.voltage !== undefined;
  if (flowing && Number.isNaN(current)) return 'current';
  const looked = wanted?.temperature === true && thermometer !== undefined;
  return looked && temperature === undefined ? 'temperature' : undefined;
}
