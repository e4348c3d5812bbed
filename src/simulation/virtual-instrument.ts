import { type Group, type Post, roleOf } from '../files/bench.js';
import type { Driver } from '../files/driver.js';
import type { SimulatedError, Simulation } from '../files/simulation-section.js';
import type { Ohms, Seconds } from '../quantity/quantity.js';
import type { Dialect, Interpreter, MeterMode } from './dialects/dialect.js';
import { errorOf, shown } from './instrument-errors.js';
import { faultTime, reversedFrom } from './instrument-faults.js';
import { Lag } from './lag.js';
import type { Incoming } from './message-splitter.js';
import { ohmsAt, type Sight, voltsAt } from './meter-sight.js';
import type { MeterPlace, Probes } from './probes.js';
import type { Random } from './random.js';
import { Relays } from './relays.js';
import type { Moment, VirtualBench } from './virtual-bench.js';

/** A converter averages; so many looks stand for its aperture. */
const LOOKS_PER_READING = 16;

/** How long a reading takes when the simulation does not say; a scanner has none. */
const USUAL_READING_TIME: Readonly<Record<Dialect['role'], Seconds>> = {
  load: 0.01,
  meter: 0.02,
  scanner: 0,
  thermometer: 0.1,
};

/** What a relay takes to close or to open. */
const RELAY_TIME: Seconds = 0.004;

/** The leads of a meter, there and back. */
const LEADS = { least: 0.1, most: 0.3 };

/** The range of a load whose driver gives no ratings. */
const USUAL_RANGE = { current: 60, voltage: 150 };

export interface InstrumentFacts {
  readonly post: Post;
  readonly bench: VirtualBench;
  readonly probes: Probes;
  readonly simulation: Simulation;
  readonly group: Group | undefined;
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

type Quantity = 'voltage' | 'current' | 'power' | 'resistance' | 'temperature';

/** One instrument: a way of speaking, its own errors, the time it takes, and faults. */
export class VirtualInstrument {
  readonly post: Post;
  /** The name of its way of speaking. */
  readonly dialect: string;
  readonly lostFrom: Seconds;
  readonly #silentFrom: Seconds;
  readonly #brokenFrom: Seconds;
  readonly #bench: VirtualBench;
  readonly #probes: Probes;
  readonly #simulation: Simulation;
  readonly #replyEnd: string;
  readonly #interpreter: Interpreter;
  readonly #errors: Readonly<Record<Quantity, SimulatedError>>;
  readonly #random: Random;
  readonly #readingTime: Seconds;
  readonly #relays: Relays;
  readonly #leads: Ohms;
  #mode: MeterMode = 'voltage';
  /** When someone at its panel sets the meter to resistance; never, once that is done. */
  #panelAt: Seconds;
  readonly #lag: Lag;
  /** One thing after the other: when it has done all that it was told. */
  #free: Seconds = 0;

  constructor({ post, bench, probes, simulation, group, driver, dialect, random }: InstrumentFacts) {
    const { role } = dialect;
    const fault = (what: Parameters<typeof faultTime>[3]): Seconds =>
      faultTime(simulation, group, post, what);
    this.post = post;
    this.dialect = dialect.name;
    this.lostFrom = fault(`${role}-lost`);
    this.#silentFrom = fault(`${role}-silent`);
    this.#brokenFrom = fault('lead-broken');
    this.#panelAt = fault('meter-wrong-mode');
    this.#bench = bench;
    this.#probes = probes;
    this.#simulation = simulation;
    this.#replyEnd = dialect.replyEnd;
    const errorIn = (quantity: Quantity): SimulatedError =>
      errorOf(simulation, post, driver, quantity, random);
    this.#errors = {
      voltage: errorIn('voltage'),
      current: errorIn('current'),
      power: errorIn('power'),
      resistance: errorIn('resistance'),
      temperature: errorIn('temperature'),
    };
    this.#random = random.fork(`${post} readings`);
    this.#leads = random.fork(`${post} leads`).uniform(LEADS.least, LEADS.most);
    this.#readingTime =
      (simulation.instruments[post] ?? simulation.instruments[role])?.readingTime ?? USUAL_READING_TIME[role];
    this.#lag = new Lag(driver.settling);
    const stuck = fault('scanner-stuck');
    const unnoticed = fault('scanner-stuck-unnoticed');
    this.#relays = new Relays({ from: Math.min(stuck, unnoticed), noticed: stuck <= unnoticed });
    this.#interpreter = this.#wake(dialect, driver);
    bench.onStep((before, after) => {
      this.#lag.step(after.at, {
        voltage: this.#seen(before).volts - this.#seen(after).volts,
        current: before.current - after.current,
      });
    });
  }

  /** Takes what has come in at a moment of the bench's time. A silent instrument neither answers nor obeys. */
  hear(incoming: Incoming, at: Seconds): Answer {
    this.#free = Math.max(this.#free, at);
    if (this.#free >= this.#silentFrom) return { reply: undefined, readyAt: this.#free };
    if (this.#free >= this.#panelAt) {
      this.#mode = 'resistance';
      this.#panelAt = Number.POSITIVE_INFINITY;
    }
    if (incoming.kind === 'overrun') {
      this.#interpreter.overrun();
      return { reply: undefined, readyAt: this.#free };
    }
    const { reply } = this.#interpreter.hear(incoming.text);
    return { reply: reply === undefined ? undefined : reply + this.#replyEnd, readyAt: this.#free };
  }

  #wake(dialect: Dialect, { ratings }: Driver): Interpreter {
    const identity = `railproof,simulated ${dialect.role},K-bench,${serialNumber(this.post)}`;
    switch (dialect.role) {
      case 'load':
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
      case 'meter':
        return dialect.wake({
          identity,
          mode: () => this.#mode,
          setMode: (mode) => {
            this.#mode = mode;
          },
          measure: (what) => (what === 'voltage' ? this.#read('voltage') : this.#readOhms()),
        });
      case 'scanner':
        return dialect.wake({
          identity,
          closed: () => this.#relays.said,
          close: (channels) => {
            this.#relays.close(channels, this.#free);
            this.#relaysMoved();
          },
          open: (channels) => {
            this.#relays.open(channels, this.#free);
            this.#relaysMoved();
          },
        });
      case 'thermometer':
        return dialect.wake({ identity, measure: () => this.#readTemperature() });
    }
  }

  #relaysMoved(): void {
    this.#free += RELAY_TIME;
    this.#probes.close(this.#relays.closed);
  }

  /** One reading: the mean over its aperture, the noise, then this instrument's own errors. */
  #read(what: 'voltage' | 'current' | 'power'): number {
    const moments = this.#aperture();
    const sights = moments.map((moment) => this.#seen(moment));
    const deviation = Math.max(...sights.map(({ noise }) => noise));
    const noise = deviation === 0 ? 0 : deviation * this.#random.normal();
    const current = mean(moments.map((moment) => moment.current + this.#lag.of('current', moment.at)));
    const voltage =
      mean(moments.map(({ at }, look) => (sights[look]?.volts ?? 0) + this.#lag.of('voltage', at))) + noise;
    const value = { voltage, current, power: voltage * current }[what];
    return shown(value, this.#errors[what], this.#random);
  }

  #readOhms(): Ohms {
    const ohms = this.#aperture().map((moment) =>
      ohmsAt(this.#place(moment), this.#leads, moment, this.#bench),
    );
    return shown(mean(ohms), this.#errors.resistance, this.#random);
  }

  /** It touches the first module. */
  #readTemperature(): number {
    const temperature = mean(this.#aperture().map((moment) => moment.temperature));
    return shown(temperature, this.#errors.temperature, this.#random);
  }

  /** Looks at the world over one reading, which takes its time. */
  #aperture(): readonly Moment[] {
    const from = this.#free;
    this.#free = from + this.#readingTime;
    return this.#bench.look(
      Array.from(
        { length: LOOKS_PER_READING },
        (_, look) => from + ((look + 0.5) / LOOKS_PER_READING) * this.#readingTime,
      ),
    );
  }

  /** The load sees its own terminals, a meter what its probes touch. */
  #seen(moment: Moment): Sight {
    if (roleOf(this.post) !== 'meter') {
      return { volts: moment.loadVoltage + moment.ripple, noise: moment.noise };
    }
    const place = this.#place(moment);
    const sight = voltsAt(place, moment, this.#bench);
    return this.#swapped(place, moment.at) ? { ...sight, volts: -sight.volts } : sight;
  }

  /** A broken lead touches nothing, wherever it is held. */
  #place({ at }: Moment): MeterPlace {
    return at >= this.#brokenFrom ? { kind: 'apart' } : this.#probes.placeOf(this.post);
  }

  #swapped(place: MeterPlace, at: Seconds): boolean {
    return (
      (place.kind === 'ballast-of' || place.kind === 'output-of') &&
      at >= reversedFrom(this.#simulation, place.module)
    );
  }
}

/** The places' own meters are told apart by theirs. */
function serialNumber(post: Post): number {
  return post.startsWith('meter-') ? 1 + Number(post.slice('meter-'.length)) : 1;
}

function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}
