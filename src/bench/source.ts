import type { Clock } from '../clock/clock.js';
import type { SourcePlace } from '../files/bench.js';
import type { Instrument } from '../instrument/instrument.js';
import type { Session } from '../instrument/session.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Ratio, Seconds } from '../quantity/quantity.js';
import { DisobeyedError, SourceSagsError, SourceWentOffError } from './bench-error.js';

/** What a bench file asks of its source. */
export type Feed = Pick<SourcePlace, 'voltage' | 'current' | 'offFor'>;

/** Of the voltage that it was told, what a source in good order gives at least. */
const leastOfVoltage: Ratio = 0.95;
/** A module that starts draws more for a moment; so many looks in a row tell that it does not pass. */
const looks = 3;
const betweenLooks: Seconds = 0.1;

const switchOffByHand = 'switch it off by hand, or unplug the module from it';

/**
 * The dc source that feeds the modules. It reads its output's state back, and when it answers again after a gap
 * that state is read before anything else, and held against what it was.
 */
export class Source {
  readonly instrument: Instrument;
  readonly feed: Feed;
  readonly #clock: Clock;
  /** As last read back; nothing is expected of one that was never read, or is just being switched. */
  #output: 'on' | 'off' | 'going-on' | 'unknown' = 'unknown';

  constructor(instrument: Instrument, feed: Feed, clock: Clock) {
    this.instrument = instrument;
    this.feed = feed;
    this.#clock = clock;
    instrument.lookFirst((session, tellAgain) => this.#lookFirst(session, tellAgain));
  }

  /** Its voltage and the most that it may give; the output is not touched. */
  async prepare(): Promise<void> {
    await this.instrument.perform('set-voltage', { volts: this.feed.voltage });
    await this.instrument.perform('set-current', { amps: this.feed.current });
  }

  /** @throws DisobeyedError when the source says that its output is still off. */
  async on(): Promise<void> {
    this.#output = 'going-on';
    await this.instrument.perform('output-on');
    if (await this.isOn()) return;
    throw this.#disobeyed(
      'was told to switch its output on and says that it is off',
      'look at its panel: what does it protect itself against, does it wait for a key there?',
    );
  }

  /** @throws DisobeyedError when the source says that its output is still on. */
  async off(): Promise<void> {
    this.#output = 'unknown';
    await this.instrument.perform('output-off');
    if (await this.isOn()) {
      throw this.#disobeyed('was told to switch its output off and says that it is on', switchOffByHand);
    }
  }

  /**
   * Off, and on again once the modules have forgotten what they were: what clears a latch. What is on
   * the load meanwhile is the caller's business.
   * @throws the signal's reason when the run is stopped meanwhile; the output is off then.
   */
  async cycle(signal: AbortSignal): Promise<void> {
    await this.off();
    await this.#clock.sleep(this.feed.offFor, signal);
    await this.on();
  }

  /**
   * Whether it feeds the modules as it was told to, where it was told so: what they do while it does not is not
   * their own doing.
   * @throws SourceWentOffError, SourceSagsError
   */
  async confirm(): Promise<void> {
    if (this.#output !== 'on') return;
    if (!(await this.isOn())) throw new SourceWentOffError(this.address);
    if (!this.instrument.reads('voltage')) return;
    for (let look = 1; ; look += 1) {
      const read = await this.instrument.read('voltage');
      if (read.kind !== 'value' || read.value >= leastOfVoltage * this.feed.voltage) return;
      if (look === looks)
        throw new SourceSagsError(this.address, { gives: read.value, told: this.feed.voltage });
      await this.#clock.sleep(betweenLooks);
    }
  }

  /**
   * Off by the driver's make-safe messages, whatever state it was in; read back, and what that says decides.
   * @throws DisobeyedError when the source says that its output is still on.
   */
  async makeSafe(): Promise<void> {
    this.#output = 'unknown';
    const complaint: unknown = await this.instrument.perform('make-safe').then(
      () => undefined,
      (error: unknown) => error,
    );
    const on = await this.isOn().catch((error: unknown) => {
      throw complaint ?? error;
    });
    if (!on) return;
    const part = { driver: this.instrument.driver.name, section: 'operations', name: 'make-safe' } as const;
    const told = { part, complaint };
    throw this.#disobeyed('was made safe and says that its output is on', switchOffByHand, told);
  }

  async isOn(): Promise<boolean> {
    const on = await this.instrument.flag('output-state');
    this.#output = on ? 'on' : 'off';
    return on;
  }

  get address(): string {
    return this.instrument.address;
  }

  /**
   * One that is on keeps what it was told. One that is off may have lost its power, and with it all that it was
   * told; so it is told again, and its output left as it is.
   * @throws SourceWentOffError, DisobeyedError when it is not as it was
   */
  async #lookFirst(session: Session, tellAgain: () => Promise<void>): Promise<string> {
    const before = this.#output;
    const now = (await session.flag('output-state')) ? 'on' : 'off';
    if (before === 'on' && now === 'off') throw new SourceWentOffError(this.address);
    if (before === 'off' && now === 'on') {
      throw this.#disobeyed(
        'was off and is on now that it answers again',
        'somebody at its panel, another program, or the way it starts up: find out which before it is used again',
      );
    }
    if (now === 'off') await tellAgain();
    return `its output is ${before === now ? 'still ' : ''}${now}`;
  }

  #disobeyed(
    what: string,
    advice: string,
    told?: ConstructorParameters<typeof DisobeyedError>[4],
  ): DisobeyedError {
    return new DisobeyedError(this.address, what, advice, 'source', told);
  }
}

/** For plans and notices: `24 V, 3 A at most`. */
export function feedInWords({ voltage, current }: Pick<Feed, 'voltage' | 'current'>): string {
  return `${formatQuantity(voltage, 'voltage')}, ${formatQuantity(current, 'current')} at most`;
}
