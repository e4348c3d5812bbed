import type { DriverReading } from '../files/driver.js';
import type { DriverPart } from './driver-part.js';
import { NotInDriverError } from './instrument-errors.js';
import { NumberReader } from './number-reader.js';
import { type About, readChannel, readFlag } from './reading.js';
import type { Measurement } from './scpi-number.js';
import { ask, check, type Talk } from './tell.js';
import { understood } from './understood.js';

type Kind = DriverReading['kind'];

/** All that is read from an instrument, by the names that its driver has for it. */
export class Readings {
  /** Whether something is off is waited for after a wish to stop, too. */
  readonly #talk: Talk;
  readonly #numbers: ReadonlyMap<string, NumberReader>;

  constructor(talk: Talk) {
    this.#talk = { ...talk, signal: undefined };
    this.#numbers = new Map(
      Object.entries(talk.driver.readings).flatMap(([name, reading]): [string, NumberReader][] =>
        reading.kind === 'number' ? [[name, new NumberReader(talk, name, reading)]] : [],
      ),
    );
  }

  /** @throws as `Session.read` */
  async number(name: string): Promise<Measurement> {
    const reader = this.#numbers.get(name);
    if (reader === undefined) throw this.#lacks(name, 'number');
    return reader.read();
  }

  /** @throws as `Session.flag` */
  async flag(name: string): Promise<boolean> {
    const reading = this.#wanted(name, 'flag');
    const flag = await this.#ask(name, reading, readFlag);
    if (reading.ask.some(({ selectsChannel }) => selectsChannel === true))
      await check(this.#talk, reading.ask, this.#part(name));
    return flag;
  }

  /** @throws as `Session.channel` */
  async channel(name: string): Promise<number | null> {
    return this.#ask(name, this.#wanted(name, 'channel'), readChannel);
  }

  /** The instrument may be on any range now. */
  forgetRanges(): void {
    for (const reader of this.#numbers.values()) reader.forgetRange();
  }

  async #ask<Reading extends DriverReading, Result>(
    name: string,
    reading: Reading,
    understand: (reply: string, reading: Reading, about: About) => Result,
  ): Promise<Result> {
    const { dialogue } = this.#talk;
    const part = this.#part(name);
    const reply = await ask(this.#talk, reading.ask, part);
    const about = { address: dialogue.address, question: reading.ask.at(-1)?.text ?? '', part };
    return understood(dialogue, () => understand(reply, reading, about));
  }

  #wanted<Wanted extends Kind>(name: string, kind: Wanted): Extract<DriverReading, { kind: Wanted }> {
    const { readings } = this.#talk.driver;
    const reading = Object.hasOwn(readings, name) ? readings[name] : undefined;
    if (reading?.kind !== kind) throw this.#lacks(name, kind);
    return reading as Extract<DriverReading, { kind: Wanted }>;
  }

  #part(name: string): DriverPart {
    return { driver: this.#talk.driver.name, section: 'readings', name };
  }

  #lacks(name: string, kind: Kind): NotInDriverError {
    return new NotInDriverError({ driver: this.#talk.driver.name, what: `${kind} reading "${name}"` });
  }
}
