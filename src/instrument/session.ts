import type { Clock } from '../clock/clock.js';
import type { Driver, DriverReading, Message, Role } from '../files/driver.js';
import type { Connection } from './connection.js';
import { Dialogue } from './dialogue.js';
import { readErrorQueue } from './error-queue.js';
import { isIdentityFor } from './identity.js';
import { InstrumentComplainedError, NotInDriverError, WrongInstrumentError } from './instrument-errors.js';
import { tellMakeSafeAfresh } from './make-safe.js';
import { fillMessage, type OperationValues } from './message.js';
import { noticeText, type Notice, type OnNotice } from './notice.js';
import { readChannel, readFlag, readNumber, type About } from './reading.js';
import type { ScpiError } from './scpi-error.js';
import type { Measurement } from './scpi-number.js';

export interface SessionParts {
  readonly role: Role;
  readonly driver: Driver;
  readonly connection: Connection;
  readonly clock: Clock;
  /** For the journal: late replies, bytes nobody asked for, errors from before. */
  readonly onNotice?: OnNotice;
  /**
   * `make-safe` tells what makes it safe before anything is asked, so that no silence and no complaint comes
   * before it. How it complains is then no reason not to open it.
   */
  readonly first?: 'identity' | 'make-safe';
  /** Who must answer, where that is known from before: nobody else will do. */
  readonly identity?: string;
}

/** What is said to an instrument over one connection, as its driver says it. It takes no turns. */
export class Session {
  /** What it answered to the question who it is. */
  readonly identity: string;
  readonly #driver: Driver;
  readonly #dialogue: Dialogue;

  private constructor(driver: Driver, identity: string, dialogue: Dialogue) {
    this.identity = identity;
    this.#driver = driver;
    this.#dialogue = dialogue;
  }

  /**
   * Finds out who is there, empties the error queue of what is in it from before, and sends the driver's
   * `prepare`. Nothing is switched on. When it fails the connection is closed.
   * @throws WrongInstrumentError when what answers is not what the driver is for, or not who answered before
   * @throws InstrumentComplainedError when the error queue does not get clear, or `prepare` is refused
   * @throws InstrumentSilentError, ReplyNotUnderstoodError, ConnectionLostError and the rest of the dialogue's
   */
  static async open(parts: SessionParts): Promise<Session> {
    const { driver, connection, clock, onNotice, first = 'identity' } = parts;
    const fits = isIdentityFor(driver);
    const isIdentity =
      parts.identity === undefined ? fits : (reply: string): boolean => reply.trim() === parts.identity;
    const dialogue = new Dialogue({
      connection,
      wire: driver.wire,
      clock,
      identify: driver.identify,
      isIdentity,
      ...(onNotice && { onNotice }),
    });
    try {
      if (first === 'make-safe') await tellMakeSafeAfresh(dialogue, driver);
      const identity = await identityOf(dialogue, parts, isIdentity);
      const session = new Session(driver, identity, dialogue);
      const prepared = session.#prepare(onNotice);
      // Whether it is safe is read from it later, whatever it says of how it was prepared.
      await (first === 'make-safe' ? prepared.catch(() => undefined) : prepared);
      return session;
    } catch (error) {
      await dialogue.close();
      throw error;
    }
  }

  get address(): string {
    return this.#dialogue.address;
  }

  /**
   * Sends the messages of an operation, all of them, then reads the error queue where there is one.
   * @throws InstrumentComplainedError with what the queue holds
   * @throws NotInDriverError; RangeError when a value that the messages need is missing
   */
  async perform(operation: string, values: OperationValues = {}): Promise<void> {
    const { operations, name } = this.#driver;
    const messages = Object.hasOwn(operations, operation) ? operations[operation] : undefined;
    if (messages === undefined)
      throw new NotInDriverError({ driver: name, what: `operation "${operation}"` });
    await this.#send(messages.map((message) => ({ ...message, text: fillMessage(message.text, values) })));
  }

  /**
   * A number, in the unit of its dimension.
   * @throws ReplyNotUnderstoodError, InstrumentSilentError, NotInDriverError and the rest of the dialogue's
   */
  async read(reading: string): Promise<Measurement> {
    return this.#reply(this.#wanted(reading, 'number'), readNumber);
  }

  /**
   * A yes or no.
   * @throws as `read`; also when the reply says neither
   */
  async flag(reading: string): Promise<boolean> {
    return this.#reply(this.#wanted(reading, 'flag'), readFlag);
  }

  /**
   * A scanner's closed channel; null where none is.
   * @throws as `read`
   */
  async channel(reading: string): Promise<number | null> {
    return this.#reply(this.#wanted(reading, 'channel'), readChannel);
  }

  /** Hands the instrument back to its front panel, as the driver says. */
  release(): Promise<void> {
    return this.#send(this.#driver.release);
  }

  /** Never rejects; a question under way ends with ConnectionLostError. */
  close(): Promise<void> {
    return this.#dialogue.close();
  }

  async #prepare(onNotice: OnNotice | undefined): Promise<void> {
    const stale = await readErrorQueue(this.#dialogue, this.#driver.errors);
    for (const entry of stale.entries) {
      const notice: Notice = { kind: 'stale-error', entry };
      onNotice?.(noticeText(this.address, notice), notice);
    }
    if (!stale.clear) throw this.#complaint(stale.entries, []);
    await this.#send(this.#driver.prepare);
  }

  async #send(messages: readonly Message[]): Promise<void> {
    for (const { text } of messages) await this.#dialogue.tell(text);
    if (messages.length === 0) return;
    const { entries } = await readErrorQueue(this.#dialogue, this.#driver.errors);
    if (entries.length > 0) {
      throw this.#complaint(
        entries,
        messages.map(({ text }) => text),
      );
    }
  }

  async #reply<Reading extends DriverReading, Result>(
    reading: Reading,
    understand: (reply: string, reading: Reading, about: About) => Result,
  ): Promise<Result> {
    const question = reading.ask.at(-1)?.text ?? '';
    for (const { text } of reading.ask.slice(0, -1)) await this.#dialogue.tell(text);
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
    const { readings } = this.#driver;
    const reading = Object.hasOwn(readings, name) ? readings[name] : undefined;
    if (reading?.kind !== kind) {
      throw new NotInDriverError({ driver: this.#driver.name, what: `${kind} reading "${name}"` });
    }
    return reading as Extract<DriverReading, { kind: Kind }>;
  }

  #complaint(entries: readonly ScpiError[], after: readonly string[]): InstrumentComplainedError {
    return new InstrumentComplainedError({ address: this.address, entries, after });
  }
}

async function identityOf(
  dialogue: Dialogue,
  { driver, role, identity: before }: SessionParts,
  isIdentity: (reply: string) => boolean,
): Promise<string> {
  let identity = await dialogue.ask(driver.identify);
  if (!isIdentity(identity)) {
    // It may be the late answer to something that an earlier program asked.
    dialogue.doubt();
    identity = await dialogue.ask(driver.identify).catch(() => identity);
  }
  if (isIdentity(identity)) return identity.trim();
  throw new WrongInstrumentError({ address: dialogue.address, role, driver: driver.name, identity, before });
}
