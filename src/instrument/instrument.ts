import type { Clock } from '../clock/clock.js';
import type { Driver, DriverReading, Role } from '../files/driver.js';
import type { Connection } from './connection.js';
import { Dialogue } from './dialogue.js';
import type { Trace } from './dialogue-record.js';
import { readErrorQueue } from './error-queue.js';
import { isIdentityFor } from './identity.js';
import { InstrumentComplainedError, NotInDriverError, WrongInstrumentError } from './instrument-errors.js';
import { noticeText, type Notice, type OnNotice } from './notice.js';
import { fillMessage, type OperationValues } from './message.js';
import { tellMakeSafe } from './make-safe.js';
import { readChannel, readFlag, readNumber, type About } from './reading.js';
import type { ScpiError } from './scpi-error.js';
import type { Measurement } from './scpi-number.js';
import { Turns } from './turns.js';

export interface InstrumentParts {
  readonly role: Role;
  readonly driver: Driver;
  readonly connection: Connection;
  readonly clock: Clock;
  /** For the journal: late replies, bytes nobody asked for, errors from before. */
  readonly onNotice?: OnNotice;
  readonly trace?: Trace;
  /**
   * `make-safe` tells what makes it safe before anything is asked, so that no silence and no complaint comes
   * before it. How it complains is then no reason not to open it.
   */
  readonly first?: 'identity' | 'make-safe';
}

/** One instrument of the bench, spoken to as its driver says. One act at a time; others wait their turn. */
export class Instrument {
  readonly role: Role;
  readonly driver: Driver;
  /** What it answered to the question who it is. */
  readonly identity: string;
  readonly #dialogue: Dialogue;
  readonly #turns = new Turns();

  private constructor(role: Role, driver: Driver, identity: string, dialogue: Dialogue) {
    this.role = role;
    this.driver = driver;
    this.identity = identity;
    this.#dialogue = dialogue;
  }

  /**
   * Finds out who is there, empties the error queue of what is in it from before, and sends the driver's
   * `prepare`. Nothing is switched on. When it fails the connection is closed.
   * @throws WrongInstrumentError when what answers is not what the driver is for
   * @throws InstrumentComplainedError when the error queue does not get clear, or `prepare` is refused
   * @throws InstrumentSilentError, ReplyNotUnderstoodError, ConnectionLostError and the rest of the dialogue's
   */
  static async open(parts: InstrumentParts): Promise<Instrument> {
    const { role, driver, connection, clock, onNotice, trace, first = 'identity' } = parts;
    const dialogue = new Dialogue({
      connection,
      wire: driver.wire,
      clock,
      identify: driver.identify,
      isIdentity: isIdentityFor(driver),
      ...(onNotice && { onNotice }),
      ...(trace && { trace }),
    });
    try {
      if (first === 'make-safe') await tellMakeSafe(dialogue, driver);
      const identity = await identityOf(dialogue, driver, role);
      const instrument = new Instrument(role, driver, identity, dialogue);
      const prepared = instrument.#prepare(onNotice);
      // Whether it is safe is read from it later, whatever it says of how it was prepared.
      await (first === 'make-safe' ? prepared.catch(() => undefined) : prepared);
      return instrument;
    } catch (error) {
      await dialogue.close();
      throw error;
    }
  }

  get address(): string {
    return this.#dialogue.address;
  }

  /** Whether the driver says how to do it. */
  has(operation: string): boolean {
    return Object.hasOwn(this.driver.operations, operation);
  }

  /** Whether the driver says how to read it. */
  reads(reading: string): boolean {
    return Object.hasOwn(this.driver.readings, reading);
  }

  /**
   * Sends the messages of an operation, all of them, then reads the error queue where there is one.
   * @throws InstrumentComplainedError with what the queue holds
   * @throws NotInDriverError; RangeError when a value that the messages need is missing
   */
  perform(operation: string, values: OperationValues = {}): Promise<void> {
    return this.#turns.take(() => {
      const messages = this.has(operation) ? this.driver.operations[operation] : undefined;
      if (messages === undefined) {
        throw new NotInDriverError({ driver: this.driver.name, what: `operation "${operation}"` });
      }
      return this.#send(messages.map((message) => fillMessage(message, values)));
    });
  }

  /**
   * A number, in the unit of its dimension.
   * @throws ReplyNotUnderstoodError, InstrumentSilentError, NotInDriverError and the rest of the dialogue's
   */
  read(reading: string): Promise<Measurement> {
    return this.#turns.take(() => this.#reply(this.#wanted(reading, 'number'), readNumber));
  }

  /**
   * A yes or no.
   * @throws as `read`; also when the reply says neither
   */
  flag(reading: string): Promise<boolean> {
    return this.#turns.take(() => this.#reply(this.#wanted(reading, 'flag'), readFlag));
  }

  /**
   * A scanner's closed channel; null where none is.
   * @throws as `read`
   */
  channel(reading: string): Promise<number | null> {
    return this.#turns.take(() => this.#reply(this.#wanted(reading, 'channel'), readChannel));
  }

  /** Hands the instrument back to its front panel, as the driver says. */
  release(): Promise<void> {
    return this.#turns.take(() => this.#send(this.driver.release));
  }

  /** Never rejects. */
  close(): Promise<void> {
    return this.#dialogue.close();
  }

  async #prepare(onNotice: OnNotice | undefined): Promise<void> {
    const stale = await readErrorQueue(this.#dialogue, this.driver.errors);
    for (const entry of stale.entries) {
      const notice: Notice = { kind: 'stale-error', entry };
      onNotice?.(noticeText(this.address, notice), notice);
    }
    if (!stale.clear) throw this.#complaint(stale.entries, []);
    await this.#send(this.driver.prepare);
  }

  async #send(messages: readonly string[]): Promise<void> {
    for (const message of messages) await this.#dialogue.tell(message);
    if (messages.length === 0) return;
    const { entries } = await readErrorQueue(this.#dialogue, this.driver.errors);
    if (entries.length > 0) throw this.#complaint(entries, messages);
  }

  async #reply<Reading extends DriverReading, Result>(
    reading: Reading,
    understand: (reply: string, reading: Reading, about: About) => Result,
  ): Promise<Result> {
    const question = reading.ask.at(-1) ?? '';
    for (const message of reading.ask.slice(0, -1)) await this.#dialogue.tell(message);
    const reply = await this.#dialogue.ask(question);
    try {
      return understand(reply, reading, { address: this.address, question });
    } catch (error) {
      this.#dialogue.doubt();
      throw error;
    }
  }

  #wanted<Kind extends DriverReading['kind']>(
    name: string,
    kind: Kind,
  ): Extract<DriverReading, { kind: Kind }> {
    const reading = this.reads(name) ? this.driver.readings[name] : undefined;
    if (reading?.kind !== kind) {
      throw new NotInDriverError({ driver: this.driver.name, what: `${kind} reading "${name}"` });
    }
    return reading as Extract<DriverReading, { kind: Kind }>;
  }

  #complaint(entries: readonly ScpiError[], after: readonly string[]): InstrumentComplainedError {
    return new InstrumentComplainedError({ address: this.address, entries, after });
  }
}

async function identityOf(dialogue: Dialogue, driver: Driver, role: Role): Promise<string> {
  const isIdentity = isIdentityFor(driver);
  let identity = await dialogue.ask(driver.identify);
  if (!isIdentity(identity)) {
    // It may be the late answer to something that an earlier program asked.
    dialogue.doubt();
    identity = await dialogue.ask(driver.identify).catch(() => identity);
  }
  if (isIdentity(identity)) return identity.trim();
  throw new WrongInstrumentError({ address: dialogue.address, role, driver: driver.name, identity });
}
