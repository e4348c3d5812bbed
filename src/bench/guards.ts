import type { Bench, BenchDrivers } from '../files/bench.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Dimension, Volts } from '../quantity/quantity.js';
import { GuardTrippedError } from './bench-error.js';
import { type Ceilings, ceilingText, overCurrentFactor } from './ceilings.js';
import { FrozenCurrent, FrozenMeter } from './frozen-readings.js';
import { guardProbe, ImpossibleCurrents } from './impossible-readings.js';
import type { Taken } from './sample.js';
import { trustIn } from './trust.js';

export interface GuardLimits extends Ceilings {
  /** The nameplate's; a voltage further below zero than a fiftieth of it is reversed polarity. */
  readonly ratedVoltage: Volts;
}

/** What the load had been told when something was read: nothing where its input was off. */
export interface Told {
  readonly current?: Amperes;
  readonly voltage?: Volts;
}

/**
 * The guards of one run. Every sample passes them before anything is made of it. What they remember of earlier
 * samples is a few numbers, however long the run is.
 */
export class Guards {
  readonly #limits: GuardLimits;
  readonly #remembering: readonly Pick<FrozenCurrent | FrozenMeter | ImpossibleCurrents, 'look'>[];

  constructor(limits: GuardLimits, bench: Bench, drivers: BenchDrivers) {
    this.#limits = limits;
    const trust = trustIn(bench, drivers, limits.ratedVoltage);
    this.#remembering = [new ImpossibleCurrents(trust), new FrozenCurrent(trust), new FrozenMeter(trust)];
  }

  /**
   * Looks at everything that was read at one moment.
   * @throws GuardTrippedError naming the guard, the reading and who set the limit.
   */
  look(taken: readonly Taken[], told: Told): void {
    guard(taken, this.#limits);
    const seen = {
      current: valueOf(taken, 'load', 'current'),
      atLoad: valueOf(taken, 'load', 'voltage'),
      atMeter: valueOf(taken, 'meter', 'voltage'),
    };
    for (const one of this.#remembering) one.look(seen, told);
  }
}

/**
 * Looks at everything that was read at one moment.
 * @throws GuardTrippedError naming the guard, the reading and who set the limit.
 */
export function guard(taken: readonly Taken[], limits: GuardLimits): void {
  for (const { of, what, at, measurement } of taken) {
    if (what === 'resistance') continue;
    if (measurement.kind === 'overload') {
      throw new GuardTrippedError(
        `over-${what}`,
        `the ${of} shows overload instead of a ${what}`,
        'what is connected is beyond its range: check the leads and the module',
      );
    }
    if (measurement.kind !== 'value') continue;
    // Across a ballast, or across a module that its string drives, the sign says something else.
    if (what === 'voltage' && at === undefined) guardVoltage(of, measurement.value, limits);
    if (what === 'current') guardCurrent(of, measurement.value, limits);
    if (what === 'temperature') guardTemperature(of, measurement.value, limits);
  }
  guardPower(taken, limits);
}

function guardVoltage(of: string, volts: number, limits: GuardLimits): void {
  if (volts > limits.voltage.value) {
    throw new GuardTrippedError(
      'over-voltage',
      `the ${of} reads ${reading(volts, 'voltage')} and ${limits.voltage.setBy} allows ${ceilingText(limits.voltage, 'voltage')}`,
      limits.voltage.setBy === 'the nameplate'
        ? 'it is another module than its file says, or it does not regulate any more: unplug it'
        : 'unplug the module, which gives more than it may here; --dry-run shows every ceiling and who sets it',
    );
  }
  if (volts < -limits.ratedVoltage / 50) {
    throw new GuardTrippedError(
      'reversed-polarity',
      `the ${of} reads ${reading(volts, 'voltage')}: the polarity is reversed`,
      'swap the leads at the module',
    );
  }
}

function guardCurrent(of: string, amps: number, limits: GuardLimits): void {
  if (amps <= limits.current.value * overCurrentFactor) return;
  throw new GuardTrippedError(
    'over-current',
    `the ${of} reads ${reading(amps, 'current')} and ${limits.current.setBy} allows ${ceilingText(limits.current, 'current')}`,
    'the load does not keep its set current: look at its panel, and walk through its driver with `railproof drivers --try`',
  );
}

function guardTemperature(of: string, celsius: number, { temperature }: GuardLimits): void {
  guardProbe(of, celsius, temperature?.value);
  if (temperature === undefined || celsius <= temperature.value) return;
  throw new GuardTrippedError(
    'over-temperature',
    `the ${of} reads ${reading(celsius, 'temperature')} and ${temperature.setBy} allows ${ceilingText(temperature, 'temperature')}`,
    'let it cool; see that nothing covers it, and ask for less current',
  );
}

/** Where the load can't read its voltage the meter's stands in for it, a little above as it is. */
function guardPower(taken: readonly Taken[], limits: GuardLimits): void {
  const atLoad = valueOf(taken, 'load', 'voltage');
  const volts = Number.isNaN(atLoad) ? valueOf(taken, 'meter', 'voltage') : atLoad;
  const power = volts * valueOf(taken, 'load', 'current');
  if (!(power > limits.power.value)) return;
  throw new GuardTrippedError(
    'over-power',
    `the load takes ${reading(power, 'power')} and ${limits.power.setBy} allows ${ceilingText(limits.power, 'power')}`,
    'lower what the procedure asks, or use a larger load',
  );
}

/** A reading may be disturbed; so many in a row are no disturbance. */
const mostBlind = 3;

/**
 * Counts the samples in a row of which nothing can be told, because a value that is needed could not be
 * read. A run that sees nothing is unguarded, and would take what it can't see for a dropout.
 */
export class BlindSamples {
  #inARow = 0;

  /** @throws GuardTrippedError `no-reading` at the third blind sample in a row. */
  count(unread: 'voltage' | 'current' | 'temperature' | 'resistance' | undefined): void {
    this.#inARow = unread === undefined ? 0 : this.#inARow + 1;
    if (unread === undefined || this.#inARow < mostBlind) return;
    throw new GuardTrippedError(
      'no-reading',
      `${this.#inARow} times in a row the ${unread} could not be read`,
      'check the ranges, the leads and the instrument that should read it',
    );
  }
}

/** What was read, to four digits; limits are written as they were set. */
function reading(value: number, dimension: Dimension): string {
  return formatQuantity(value, dimension, { significant: 4 });
}

/** Of what was read at the usual place, or at `at`; not a number when it was not read. */
export function valueOf(taken: readonly Taken[], of: string, what: string, at?: string): number {
  const found = taken.find((one) => one.of === of && one.what === what && one.at === at);
  return found?.measurement.kind === 'value' ? found.measurement.value : Number.NaN;
}
