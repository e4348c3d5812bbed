import type { Clock } from '../clock/clock.js';
import type { Driver, Message, Role } from '../files/driver.js';
import type { Seconds } from '../quantity/quantity.js';
import type { Connection } from './connection.js';
import { Dialogue } from './dialogue.js';
import type { DriverPart } from './driver-part.js';
import { isIdentityFor } from './identity.js';
import { NotInDriverError, WrongInstrumentError } from './instrument-errors.js';
import { tellBeforeWaiting, tellLocal, tellMakeSafeAfresh, tellRemote } from './make-safe.js';
import { fillMessage, type OperationValues } from './message.js';
import type { OnNotice } from './notice.js';
import { Readings } from './readings.js';
import type { Measurement } from './scpi-number.js';
import { clearErrors, type Talk, tell, tellAndCheck } from './tell.js';

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
  /**
   * Aborted when the run must stop: then nothing is waited for any more but answers, and what belongs to
   * switching off.
   */
  readonly signal?: AbortSignal | undefined;
}

/** After these a meter measures something else, or as it likes; what it was told of its ranges is void. */
const changesRanges = /^(?:make-safe|measure-.*|.*-mode)$/;

/** These are told before anything is waited for, and a wish to stop does not cut them short. */
const switchesOff = /^(?:make-safe|(?:in|out)put-off|open-all)$/;

/** What is said to an instrument over one connection, as its driver says it. It takes no turns. */
export class Session {
  /** What it answered to the question who it is. */
  readonly identity: string;
  readonly #talk: Talk;
  /** Of what is due after a wish to stop, too. */
  readonly #patient: Talk;
  readonly #readings: Readings;

  private constructor(talk: Talk, identity: string) {
    this.identity = identity;
    this.#talk = talk;
    this.#patient = { ...talk, signal: undefined };
    this.#readings = new Readings(talk);
  }

  /**
   * Puts it in remote, finds out who is there, takes from it what errors it has from before, and sends the
   * driver's `prepare`. Nothing is switched on. When it fails it is handed back and the connection closed.
   * @throws WrongInstrumentError when what answers is not what the driver is for, or not who answered before
   * @throws InstrumentComplainedError when the error queue does not get clear, or `prepare` is refused
   * @throws NotReadyError
   * @throws InstrumentSilentError, ReplyNotUnderstoodError, ConnectionLostError and the rest of the dialogue's
   */
  static async open(parts: SessionParts): Promise<Session> {
    const { driver, connection, clock, onNotice, signal, first = 'identity' } = parts;
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
      await (first === 'make-safe' ? tellMakeSafeAfresh : tellRemote)(dialogue, driver);
      const identity = await identityOf(dialogue, parts, isIdentity);
      const session = new Session({ dialogue, driver, clock, onNotice, signal }, identity);
      const prepared = session.#prepare();
      // Whether it is safe is read from it later, whatever it says of how it was prepared.
      await (first === 'make-safe' ? prepared.catch(() => undefined) : prepared);
      return session;
    } catch (error) {
      await tellLocal(dialogue, driver).catch(() => undefined);
      await dialogue.close();
      throw error;
    }
  }

  get address(): string {
    return this.#talk.dialogue.address;
  }

  /**
   * Sends the messages of an operation, all of them, then asks about errors where there is a way to.
   * @throws InstrumentComplainedError with what it reports; NotReadyError; the signal's reason instead of waiting
   * until it is ready, where nothing is switched off
   * @throws NotInDriverError; RangeError when a value that the messages need is missing
   */
  async perform(operation: string, values: OperationValues = {}): Promise<void> {
    const { operations, name } = this.#talk.driver;
    const messages = Object.hasOwn(operations, operation) ? operations[operation] : undefined;
    if (messages === undefined)
      throw new NotInDriverError({ driver: name, what: `operation "${operation}"` });
    const filled = messages.map((message) => ({ ...message, text: fillMessage(message.text, values) }));
    if (changesRanges.test(operation)) this.#readings.forgetRanges();
    const part = this.#part('operations', operation);
    if (!switchesOff.test(operation)) return tellAndCheck(this.#talk, filled, part);
    if (!(await tellBeforeWaiting(this.#talk.dialogue, filled)))
      return tellAndCheck(this.#patient, filled, part);
    await tell(this.#patient, filled, part);
    // What came too soon the first time was told again: whether it is off is read from it.
    await clearErrors(this.#patient);
  }

  /**
   * A number, in the unit of its dimension; waited for until it is due, where the driver says that it is a mean.
   * @throws ReplyNotUnderstoodError, InstrumentSilentError, NotInDriverError and the rest of the dialogue's
   * @throws InstrumentComplainedError of a range; NotReadyError
   */
  read(reading: string): Promise<Measurement> {
    return this.#readings.number(reading);
  }

  /**
   * A yes or no. Where a channel is chosen first, whether anything was wrong is asked after it: what another
   * channel says must not be believed.
   * @throws as `read`; also when the reply says neither
   */
  flag(reading: string): Promise<boolean> {
    return this.#readings.flag(reading);
  }

  /**
   * A scanner's closed channel; null where none is.
   * @throws as `read`
   */
  channel(reading: string): Promise<number | null> {
    return this.#readings.channel(reading);
  }

  /**
   * Puts it in remote and prepares it as when it was opened: it may have lost its power since then, and with it
   * what it was told.
   * @throws as `open`
   */
  async prepareAgain(): Promise<void> {
    await tellRemote(this.#talk.dialogue, this.#talk.driver);
    this.#readings.forgetRanges();
    await this.#prepare();
  }

  /**
   * The last that it is told: what the driver says is due then, and whatever came of that, what hands it back.
   * @throws as `perform`
   */
  async release(): Promise<void> {
    try {
      await tellAndCheck(this.#patient, this.#talk.driver.release, this.#part('release'));
    } finally {
      await this.handBack();
    }
  }

  /**
   * Gives it its front panel back. Many are in remote again once they are asked anything, so nothing is.
   * @throws ConnectionLostError
   */
  handBack(): Promise<void> {
    return tellLocal(this.#talk.dialogue, this.#talk.driver);
  }

  /** Never rejects; a question under way ends with ConnectionLostError. */
  close(): Promise<void> {
    return this.#talk.dialogue.close();
  }

  async #prepare(): Promise<void> {
    await clearErrors(this.#talk);
    await tellAndCheck(this.#talk, this.#talk.driver.prepare, this.#part('prepare'));
  }

  #part(section: DriverPart['section'], name?: string): DriverPart {
    return { driver: this.#talk.driver.name, section, ...(name !== undefined && { name }) };
  }
}

async function identityOf(
  dialogue: Dialogue,
  { driver, role, identity: before, first }: SessionParts,
  isIdentity: (reply: string) => boolean,
): Promise<string> {
  const told = [...driver.remote, ...(first === 'make-safe' ? (driver.operations['make-safe'] ?? []) : [])];
  let identity = await dialogue.ask(driver.identify, { within: firstAnswerWithin(driver, told) });
  if (!isIdentity(identity)) {
    // It may be the late answer to something that an earlier program asked.
    dialogue.doubt();
    identity = await dialogue.ask(driver.identify).catch(() => identity);
  }
  if (isIdentity(identity)) return identity.trim();
  throw new WrongInstrumentError({
    address: dialogue.address,
    role,
    driver: driver.name,
    identity,
    before,
    isEcho: identity.trim() === driver.identify.trim(),
  });
}

/** Of one that is not ready yet, and is not asked about it before it is known who it is. */
function firstAnswerWithin({ wire, ready }: Driver, told: readonly Message[]): Seconds {
  const patience = told.some(({ untilReady }) => untilReady === true) ? ready?.within : undefined;
  return Math.max(wire.timeout, patience ?? 0);
}
