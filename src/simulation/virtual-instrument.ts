import type { Driver } from '../files/driver.js';
import type { SimulatedError, Simulation } from '../files/simulation-section.js';
import type { Amperes, Seconds, Volts } from '../quantity/quantity.js';
import type { Dialect, Interpreter } from './dialects/dialect.js';
import { errorOf, shown } from './instrument-errors.js';
import type { Incoming } from './message-splitter.js';
import type { Random } from './random.js';
import type { Moment, VirtualBench } from './virtual-bench.js';

/** A converter averages; so many looks stand for its aperture. */
const LOOKS_PER_READING = 16;

/** How long a reading takes when the simulation does not say. */
const USUAL_READING_TIME: Readonly<Record<Dialect['role'], Seconds>> = { load: 0.01, meter: 0.02 };

/**
 * So many time constants fit into the settling time that the driver gives: by then a step has come to within
 * a twentieth of a thousandth of its size, which is what "settled" means to an honest maker.
 */
const TIME_CONSTANTS_IN_SETTLING = 10;

/** The range of a load whose driver gives no ratings. */
const USUAL_RANGE = { current: 60, voltage: 150 };

export interface InstrumentFacts {
  readonly bench: VirtualBench;
  readonly simulation: Simulation;
  readonly driver: Driver;
  readonly dialect: Dialect;
  readonly random: Random;
}

export interface Answer {
  /** With its end of line. */
  readonly reply: string | undefined;
  /** When the instrument is done with the message, and its reply begins to travel. */
  readonly readyAt: Seconds;
}

type Quantity = 'voltage' | 'current' | 'power';

/** One instrument: a way of speaking, its own errors, the time it takes, and faults. */
export class VirtualInstrument {
  readonly role: Dialect['role'];
  /** The name of its way of speaking. */
  readonly dialect: string;
  readonly lostFrom: Seconds;
  readonly #silentFrom: Seconds;
  readonly #bench: VirtualBench;
  readonly #replyEnd: string;
  readonly #interpreter: Interpreter;
  readonly #errors: Readonly<Record<Quantity, SimulatedError>>;
  readonly #random: Random;
  readonly #readingTime: Seconds;
  readonly #timeConstant: Seconds;
  /** What the last change of the output has yet to bring into the readings. */
  #lag: { readonly since: Seconds; readonly voltage: Volts; readonly current: Amperes } = {
    since: 0,
    voltage: 0,
    current: 0,
  };
  /** One thing after the other: when it has done all that it was told. */
  #free: Seconds = 0;

  constructor({ bench, simulation, driver, dialect, random }: InstrumentFacts) {
    this.role = dialect.role;
    this.dialect = dialect.name;
    this.lostFrom = faultTime(simulation, `${dialect.role}-lost`);
    this.#silentFrom = faultTime(simulation, `${dialect.role}-silent`);
    this.#bench = bench;
    this.#replyEnd = dialect.replyEnd;
    this.#errors = {
      voltage: errorOf(simulation, dialect.role, driver, 'voltage', random),
      current: errorOf(simulation, dialect.role, driver, 'current', random),
      power: errorOf(simulation, dialect.role, driver, 'power', random),
    };
    this.#random = random.fork(`${dialect.role} readings`);
    this.#readingTime = simulation.instruments[dialect.role]?.readingTime ?? USUAL_READING_TIME[dialect.role];
    this.#timeConstant = driver.settling / TIME_CONSTANTS_IN_SETTLING;
    this.#interpreter = this.#wake(dialect, driver);
    bench.onStep((before, after) => {
      this.#step(before, after);
    });
  }

  /** Takes what has come in at a moment of the bench's time. A silent instrument neither answers nor obeys. */
  hear(incoming: Incoming, at: Seconds): Answer {
    this.#free = Math.max(this.#free, at);
    if (this.#free >= this.#silentFrom) return { reply: undefined, readyAt: this.#free };
    if (incoming.kind === 'overrun') {
      this.#interpreter.overrun();
      return { reply: undefined, readyAt: this.#free };
    }
    const { reply } = this.#interpreter.hear(incoming.text);
    return { reply: reply === undefined ? undefined : reply + this.#replyEnd, readyAt: this.#free };
  }

  #wake(dialect: Dialect, { ratings }: Driver): Interpreter {
    const identity = `railproof,simulated ${dialect.role},K-bench,1`;
    if (dialect.role === 'meter') return dialect.wake({ identity, measure: (what) => this.#probe(what) });
    return dialect.wake({
      identity,
      most: {
        current: ratings.current ?? USUAL_RANGE.current,
        voltage: ratings.voltage ?? USUAL_RANGE.voltage,
      },
      state: () => this.#bench.load,
      set: (change) => {
        this.#bench.setLoad(change, this.#free);
      },
      measure: (what) => this.#read(what),
    });
  }

  /** On an output that has a voltage of its own an ohmmeter shows overload. */
  #probe(what: 'voltage' | 'resistance'): number {
    if (what === 'voltage') return this.#read('voltage');
    this.#free += this.#readingTime;
    return Number.POSITIVE_INFINITY;
  }

  /** One reading: the mean over its aperture, the module's noise, then this instrument's own errors. */
  #read(what: Quantity): number {
    const from = this.#free;
    this.#free = from + this.#readingTime;
    const moments = this.#bench.look(
      Array.from(
        { length: LOOKS_PER_READING },
        (_, look) => from + ((look + 0.5) / LOOKS_PER_READING) * this.#readingTime,
      ),
    );
    const noise = moments.every(({ phase }) => phase === 'off' || phase === 'latched')
      ? 0
      : this.#bench.module.noise * this.#random.normal();
    const current = mean(moments.map((moment) => moment.current + this.#lagging('current', moment.at)));
    const voltage =
      mean(moments.map((moment) => this.#seen(moment) + this.#lagging('voltage', moment.at))) + noise;
    const value = { voltage, current, power: voltage * current }[what];
    return shown(value, this.#errors[what], this.#random);
  }

  /** The meter has its probes at the module, the load sees its own terminals. */
  #seen({ moduleVoltage, loadVoltage, ripple }: Moment): Volts {
    return (this.role === 'meter' ? moduleVoltage : loadVoltage) + ripple;
  }

  #lagging(what: 'voltage' | 'current', at: Seconds): number {
    if (this.#timeConstant === 0) return 0;
    return this.#lag[what] * Math.exp(-Math.max(0, at - this.#lag.since) / this.#timeConstant);
  }

  #step(before: Moment, after: Moment): void {
    this.#lag = {
      since: after.at,
      voltage: this.#lagging('voltage', after.at) + this.#seen(before) - this.#seen(after),
      current: this.#lagging('current', after.at) + before.current - after.current,
    };
  }
}

function faultTime(simulation: Simulation, what: string): Seconds {
  return Math.min(
    Number.POSITIVE_INFINITY,
    ...simulation.faults.filter((fault) => fault.what === what).map(({ at }) => at),
  );
}

function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}
