import { settlingOf } from '../files/driver.js';
import type { Clock } from '../clock/clock.js';
import type { Group, Post } from '../files/bench.js';
import type { Instrument } from '../instrument/instrument.js';
import { checkMeasuresVoltage } from './meter-mode.js';
import type { Tap, Taken } from './sample.js';
import { ScannerStuckError } from './wrong-place-error.js';

/**
 * The meters of a bench and where their probes are: the one at the output of the whole, which a scanner may
 * put elsewhere and a person may move, and those that each place of a group may have of its own.
 */
export class MeterPlaces {
  readonly #group: Group | undefined;
  readonly #clock: Clock;
  readonly #meter: Instrument | undefined;
  readonly #scanner: Instrument | undefined;
  readonly #ownOf: (place: number) => Instrument | undefined;
  /** Where a person has put the probes; undefined is their usual place. */
  #moved: string | undefined;
  /** The channel that the scanner was told to close last. */
  #closed: number | undefined;

  constructor(facts: {
    readonly group: Group | undefined;
    readonly clock: Clock;
    readonly meter: Instrument | undefined;
    readonly scanner: Instrument | undefined;
    /** The own meter of a place, from 1. */
    readonly ownOf: (place: number) => Instrument | undefined;
  }) {
    this.#group = facts.group;
    this.#clock = facts.clock;
    this.#meter = facts.meter;
    this.#scanner = facts.scanner;
    this.#ownOf = facts.ownOf;
  }

  /** The operator has moved the probes; undefined is back to their usual place. */
  movedTo(at: string | undefined): void {
    this.#moved = at;
  }

  get movedAt(): string | undefined {
    return this.#moved;
  }

  /**
   * Reads the voltage at the usual place, where the probes are there, and at each tap that is within reach.
   * @throws ScannerStuckError; WrongPlaceError when a meter without a value says that it measures something else
   */
  async read(taps: readonly Tap[], take: (taken: Taken) => void): Promise<void> {
    if (this.#moved !== undefined) {
      await this.#readMeter(this.#moved, take);
      return;
    }
    if (this.#scanner === undefined) {
      if (this.#meter !== undefined) await this.#readMeter(undefined, take);
      for (const tap of taps) await this.#readOwn(tap, take);
      return;
    }
    const outputChannel = this.#group?.outputChannel;
    if (outputChannel !== undefined) {
      await this.#close(outputChannel);
      await this.#readMeter(undefined, take);
    }
    for (const tap of taps) {
      await this.#close(this.#channelOf(tap));
      await this.#readMeter(tap.at, take);
    }
  }

  /**
   * Asks whether the channel that was closed last is so still: a scanner that has lost its power has let go of
   * it, and what was read since then is of no place.
   * @throws ScannerStuckError
   */
  async confirm(): Promise<void> {
    const scanner = this.#scanner;
    if (scanner === undefined || this.#closed === undefined || this.#moved !== undefined) return;
    if (scanner.reads('closed-channel')) await checkClosed(scanner, this.#closed);
    else await scanner.perform('close-channel', { channel: this.#closed });
  }

  /** Opens every channel of the scanner, so that the meter's own leads are all that it reads. */
  async release(): Promise<void> {
    this.#closed = undefined;
    await this.#scanner?.perform('open-all');
  }

  async #readMeter(at: string | undefined, take: (taken: Taken) => void): Promise<void> {
    if (this.#meter !== undefined) await read(this.#meter, 'meter', at, take);
  }

  async #readOwn({ place, at }: Tap, take: (taken: Taken) => void): Promise<void> {
    const meter = this.#ownOf(place);
    if (meter !== undefined) await read(meter, `meter-${place}`, at, take);
  }

  /** @throws ScannerStuckError when it says that another channel is closed. */
  async #close(channel: number): Promise<void> {
    const scanner = this.#scanner;
    if (scanner === undefined) return;
    await scanner.perform('close-channel', { channel });
    if (scanner.reads('closed-channel')) await checkClosed(scanner, channel);
    this.#closed = channel;
    // The relay bounces, and what the meter measures has changed as much as on any step of the load.
    await this.#clock.sleep(
      Math.max(scanner.driver.settling, this.#meter === undefined ? 0 : settlingOf(this.#meter.driver)),
    );
  }

  #channelOf({ place }: Tap): number {
    const channel = this.#group?.places[place - 1]?.channel;
    if (channel === undefined) throw new Error(`place ${place} has no channel`);
    return channel;
  }
}

async function checkClosed(scanner: Instrument, channel: number): Promise<void> {
  const closed = await scanner.channel('closed-channel');
  if (closed !== channel) throw new ScannerStuckError(scanner.address, channel, closed);
}

async function read(
  meter: Instrument,
  of: Post,
  at: string | undefined,
  take: (taken: Taken) => void,
): Promise<void> {
  const measurement = await meter.read('voltage');
  take({ of, what: 'voltage', ...(at === undefined ? {} : { at }), measurement });
  if (measurement.kind !== 'value') await checkMeasuresVoltage(meter);
}
