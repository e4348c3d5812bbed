import { type Group, type Post, roleOf } from '../files/bench.js';
import type { Driver } from '../files/driver.js';
import type { SimulatedError, Simulation } from '../files/simulation-section.js';
import type { Celsius, Ohms, Seconds } from '../quantity/quantity.js';
import type { Dialect } from './dialects/dialect.js';
import { errorOf, shown } from './instrument-errors.js';
import { faultTime, reversedFrom } from './instrument-faults.js';
import { Lag } from './lag.js';
import { ohmsAt, type Sight, voltsAt } from './meter-sight.js';
import type { MeterPlace, Probes } from './probes.js';
import type { Random } from '../statistics/random.js';
import type { Moment, VirtualBench } from './virtual-bench.js';

/** A converter averages; so many looks stand for its aperture. */
const LOOKS_PER_READING = 16;

/** How long a reading takes when the simulation does not say; a scanner has none. */
const USUAL_READING_TIME: Readonly<Record<Dialect['role'], Seconds>> = {
  load: 0.01,
  meter: 0.02,
  scanner: 0,
  thermometer: 0.1,
  source: 0.02,
};

/** The leads of a meter, there and back. */
const LEADS = { least: 0.1, most: 0.3 };

/** What a simulated instrument is made of. */
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

type Quantity = 'voltage' | 'current' | 'power' | 'resistance' | 'temperature';

/** What one instrument reads of the world: what it touches, over its aperture, with its lag and its errors. */
export class InstrumentReadings {
  /** What one of them takes. */
  readonly time: Seconds;
  readonly #post: Post;
  readonly #bench: VirtualBench;
  readonly #probes: Probes;
  readonly #simulation: Simulation;
  readonly #errors: Readonly<Record<Quantity, SimulatedError>>;
  readonly #random: Random;
  readonly #brokenFrom: Seconds;
  readonly #leads: Ohms;
  readonly #lag: Lag;

  constructor({ post, bench, probes, simulation, group, driver, dialect, random }: InstrumentFacts) {
    const { instruments } = simulation;
    const errorIn = (quantity: Quantity): SimulatedError =>
      errorOf(simulation, post, driver, quantity, random);
    this.time =
      (instruments[post] ?? instruments[dialect.role])?.readingTime ?? USUAL_READING_TIME[dialect.role];
    this.#post = post;
    this.#bench = bench;
    this.#probes = probes;
    this.#simulation = simulation;
    this.#errors = {
      voltage: errorIn('voltage'),
      current: errorIn('current'),
      power: errorIn('power'),
      resistance: errorIn('resistance'),
      temperature: errorIn('temperature'),
    };
    this.#random = random.fork(`${post} readings`);
    this.#brokenFrom = faultTime(simulation, group, post, 'lead-broken');
    this.#leads = random.fork(`${post} leads`).uniform(LEADS.least, LEADS.most);
    this.#lag = new Lag(driver.settling);
    bench.onStep((before, after) => {
      this.#lag.step(after.at, {
        voltage: this.#seen(before).volts - this.#seen(after).volts,
        current: before.current - after.current,
      });
    });
  }

  /** The mean over an aperture that begins at this moment, the noise, then this instrument's own errors. */
  read(what: 'voltage' | 'current' | 'power', from: Seconds): number {
    const moments = this.#aperture(from);
    const sights = moments.map((moment) => this.#seen(moment));
    const deviation = Math.max(...sights.map(({ noise }) => noise));
    const noise = deviation === 0 ? 0 : deviation * this.#random.normal();
    const current = mean(moments.map((moment) => moment.current + this.#lag.of('current', moment.at)));
    const voltage =
      mean(moments.map(({ at }, look) => (sights[look]?.volts ?? 0) + this.#lag.of('voltage', at))) + noise;
    const value = { voltage, current, power: voltage * current }[what];
    return shown(value, this.#errors[what], this.#random);
  }

  ohms(from: Seconds): Ohms {
    const ohms = this.#aperture(from).map((moment) =>
      ohmsAt(this.#place(moment), this.#leads, moment, this.#bench),
    );
    return shown(mean(ohms), this.#errors.resistance, this.#random);
  }

  /** A thermometer has one probe, and that touches the first module. */
  temperature(from: Seconds): Celsius {
    const temperature = mean(this.#aperture(from).map((moment) => moment.temperature));
    return shown(temperature, this.#errors.temperature, this.#random);
  }

  /** At its own output, where a source looks. */
  ofSource(what: 'voltage' | 'current', from: Seconds): number {
    const value = mean(this.#aperture(from).map((moment) => this.#bench.sourceOutput(moment)[what]));
    return shown(value, this.#errors[what], this.#random);
  }

  #aperture(from: Seconds): readonly Moment[] {
    return this.#bench.look(
      Array.from(
        { length: LOOKS_PER_READING },
        (_, look) => from + ((look + 0.5) / LOOKS_PER_READING) * this.time,
      ),
    );
  }

  /** The load sees its own terminals, a meter what its probes touch. */
  #seen(moment: Moment): Sight {
    if (roleOf(this.#post) !== 'meter') {
      return { volts: moment.loadVoltage + moment.ripple, noise: moment.noise };
    }
    const place = this.#place(moment);
    const sight = voltsAt(place, moment, this.#bench);
    return this.#swapped(place, moment.at) ? { ...sight, volts: -sight.volts } : sight;
  }

  /** A broken lead touches nothing, wherever it is held. */
  #place({ at }: Moment): MeterPlace {
    return at >= this.#brokenFrom ? { kind: 'apart' } : this.#probes.placeOf(this.#post, at);
  }

  #swapped(place: MeterPlace, at: Seconds): boolean {
    return (
      (place.kind === 'ballast-of' || place.kind === 'output-of') &&
      at >= reversedFrom(this.#simulation, place.module)
    );
  }
}

function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}
