import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Ratio, Volts } from '../quantity/quantity.js';
import { GuardTrippedError } from './bench-error.js';
import type { Told } from './guards.js';
import { promisedError, type Trust } from './trust.js';

/** The voltages and the current of the whole in one sample; not a number where one was not read. */
export interface Seen {
  readonly current: Amperes;
  readonly atLoad: Volts;
  /** The meter's, at its usual place. */
  readonly atMeter: Volts;
}

/** A reading may be disturbed, and an output may move while it is read; so many in a row are neither. */
export const inARow = 3;

/** How far what flows may be from what was set before a load does not regulate: of the set-point, and besides. */
const follows: Ratio = 0.05;
const followsWithin: Amperes = 0.05;
/** Of the rated voltage: with less there a load may be unable to regulate, and no healthy leads lose as much. */
const half: Ratio = 0.5;
/** A load regulates well above its least voltage. */
const wellAbove = 2;

/**
 * Whether the load repeats an old reading of its current. That a reading stays the same digit for digit shows
 * nothing: a coarse one does for hours. But a load that is told to hold a current, and has the voltage to, can
 * only hold that; with its input off it sinks nothing. The same reading at set-points that no one current can
 * satisfy is none of what flows. At a module's limit, where the voltage breaks down, and in constant voltage
 * the current is the module's doing and is no witness.
 */
export class FrozenCurrent {
  readonly #trust: Trust;
  #reading = Number.NaN;
  /** Between these lies what can have flowed in all samples since the reading last changed. */
  #least = Number.NEGATIVE_INFINITY;
  #most = Number.POSITIVE_INFINITY;
  /** Samples since then that a regulating load can't have read so. */
  #beside = 0;

  constructor(trust: Trust) {
    this.#trust = trust;
  }

  /** @throws GuardTrippedError `frozen-reading` */
  look(seen: Seen, told: Told): void {
    const { current } = seen;
    if (Number.isNaN(current)) return;
    if (current !== this.#reading) this.#begin(current);
    const flows = this.#flows(seen, told);
    if (flows === undefined) return;
    this.#least = Math.max(this.#least, flows.least);
    this.#most = Math.min(this.#most, flows.most);
    // With the input off another guard counts: a switch that is welded shut reads like that too.
    if (told.current === undefined || this.#least <= this.#most) return;
    if (current < flows.least || current > flows.most) this.#beside += 1;
    if (this.#beside < inARow) return;
    const read = formatQuantity(current, 'current', { significant: 4 });
    const set = formatQuantity(told.current, 'current', { significant: 4 });
    throw new GuardTrippedError(
      'frozen-reading',
      `the load reads ${read}, digit for digit as before it was told ${set}, and the module's voltage is there`,
      'it repeats an old reading, or does not follow its set-point: look at its panel; where it shows the right ' +
        'current, its readings come later than the settling time in its driver says',
    );
  }

  #begin(current: Amperes): void {
    this.#reading = current;
    this.#least = Number.NEGATIVE_INFINITY;
    this.#most = Number.POSITIVE_INFINITY;
    this.#beside = 0;
  }

  /** What a healthy load can read then; undefined where nobody can say. */
  #flows(seen: Seen, told: Told): { readonly least: Amperes; readonly most: Amperes } | undefined {
    if (told.voltage !== undefined) return undefined;
    if (told.current === undefined) return { least: -this.#trust.zero, most: this.#trust.zero };
    if (!this.#isThere(seen)) return undefined;
    const off =
      follows * told.current + followsWithin + promisedError(this.#trust.load, 'current', told.current);
    return { least: told.current - off, most: told.current + off };
  }

  /** Every voltmeter that gave a value says that the load has what it needs to regulate. */
  #isThere({ atLoad, atMeter }: Seen): boolean {
    const read = [atLoad, atMeter].filter((volts) => !Number.isNaN(volts));
    const enough = Math.max(half * this.#trust.ratedVoltage, wellAbove * this.#trust.leastVoltage);
    return read.length > 0 && read.every((volts) => volts >= enough);
  }
}

/**
 * Whether the meter at the module repeats an old reading. The load's voltage is the same but for what the leads
 * lose, and that is never half of what the module gives: where it breaks down by more, time and again, under a
 * meter that keeps to the last digit to what it read when both agreed, the meter does not see the module any
 * more, or the load does not. (A meter that reads less than the load is told by what compares the two at each
 * sample; one that is stuck while nothing moves by more than leads may lose can't be told from a module without
 * droop.) In constant voltage a module that starts again and again is seen by the one and not by the other.
 */
export class FrozenMeter {
  readonly #trust: Trust;
  #reading = Number.NaN;
  #agreed = false;
  #apart = 0;

  constructor(trust: Trust) {
    this.#trust = trust;
  }

  /** @throws GuardTrippedError `frozen-reading` */
  look(seen: Seen, told: Told): void {
    const { atMeter, atLoad } = seen;
    if (!this.#trust.meterAtModule || Number.isNaN(atMeter) || Number.isNaN(atLoad)) return;
    if (atMeter !== this.#reading) {
      this.#reading = atMeter;
      this.#agreed = false;
      this.#apart = 0;
    }
    if (told.voltage !== undefined) return;
    if (atMeter - atLoad <= this.#mayLose(seen, told)) {
      this.#agreed = true;
      this.#apart = 0;
      return;
    }
    if (this.#agreed) this.#apart += 1;
    if (this.#apart < inARow) return;
    const read = (volts: Volts): string => formatQuantity(volts, 'voltage', { significant: 4 });
    throw new GuardTrippedError(
      'frozen-reading',
      `the meter reads ${read(atMeter)}, digit for digit as before, while the load's voltage has gone to ${read(atLoad)}`,
      'the meter repeats an old reading (on hold, at its panel?), or a lead of the load has come off',
    );
  }

  /** Between meter and load, on a bench whose leads are sound. */
  #mayLose({ current, atLoad, atMeter }: Seen, told: Told): Volts {
    const { leads, ratedVoltage, load, meter } = this.#trust;
    const amps = Math.max(told.current ?? 0, Number.isNaN(current) ? 0 : current);
    return (
      half * ratedVoltage +
      amps * (leads.resistance + 3 * leads.uncertainty) +
      promisedError(load, 'voltage', atLoad) +
      promisedError(meter, 'voltage', atMeter)
    );
  }
}
