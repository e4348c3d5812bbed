import type { Bench } from '../files/bench.js';
import type { Instrument } from '../instrument/instrument.js';
import type { Tap, Taken } from './sample.js';
import { ScannerStuckError } from './wrong-place-error.js';

/**
 * The meters of a bench and where their probes are: the one at the output of the whole, which a scanner may
 * put elsewhere and a person may move, and those that each place of a group may have of its own.
 */
export class MeterPlaces {
  readonly #bench: Bench;
  readonly #meter: Instrument | undefined;
  readonly #scanner: Instrument | undefined;
  readonly #own: readonly Instrument[];
  /** Where a person has put the probes; undefined is their usual place. */
  #moved: string | undefined;

  constructor(
    bench: Bench,
    instruments: {
      readonly meter: Instrument | undefined;
      readonly scanner: Instrument | undefined;
      readonly own: readonly Instrument[];
    },
  ) {
    this.#bench = bench;
    this.#meter = instruments.meter;
    this.#scanner = instruments.scanner;
    this.#own = instruments.own;
  }

  /** The operator has moved the probes; undefined is back to their usual place. */
  movedTo(at: string | undefined): void {
    this.#moved = at;
  }

  get movedAt(): string | undefined {
    return this.#moved;
  }

  /** Reads the voltage at the usual place, where the probes are there, and at each tap that is within reach. */
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
    const { outputChannel } = this.#bench.group ?? {};
    if (outputChannel !== undefined) {
      await this.#close(outputChannel);
      await this.#readMeter(undefined, take);
    }
    for (const tap of taps) {
      await this.#close(this.#channelOf(tap));
      await this.#readMeter(tap.at, take);
    }
  }

  /** Opens every channel of the scanner, so that the meter's own leads are all that it reads. */
  async release(): Promise<void> {
    await this.#scanner?.perform('open-all');
  }

  async #readMeter(at: string | undefined, take: (taken: Taken) => void): Promise<void> {
    if (this.#meter === undefined) return;
    const measurement = await this.#meter.read('voltage');
    take({ of: 'meter', what: 'voltage', ...(at === undefined ? {} : { at }), measurement });
  }

  async #readOwn({ place, at }: Tap, take: (taken: Taken) => void): Promise<void> {
    const meter = this.#own[place - 1];
    if (meter === undefined) return;
    take({ of: `meter-${place}`, what: 'voltage', at, measurement: await meter.read('voltage') });
  }

  /** @throws ScannerStuckError when it says that another channel is closed. */
  async #close(channel: number): Promise<void> {
    const scanner = this.#scanner;
    if (scanner === undefined) return;
    await scanner.perform('close-channel', { channel });
    if (!scanner.reads('closed-channel')) return;
    const closed = await scanner.channel('closed-channel');
    if (closed !== channel) throw new ScannerStuckError(scanner.address, channel, closed);
  }

  #channelOf({ place }: Tap): number {
    const channel = this.#bench.group?.places[place - 1]?.channel;
    if (channel === undefined) throw new Error(`place ${place} has no channel`);
    return channel;
  }
}
