import type { Clock } from '../clock/clock.js';
import type { RailproofError } from '../errors/railproof-error.js';
import type { Driver, Role } from '../files/driver.js';
import type { Seconds } from '../quantity/quantity.js';
import { ConnectionLostError } from './connection-errors.js';
import { type Again, gapText, isGap, isOver, throughGap, type WayBack } from './gap.js';
import type { OperationValues } from './message.js';
import type { Measurement } from './scpi-number.js';
import { Session, type SessionParts } from './session.js';
import { Settings } from './settings.js';
import { Turns } from './turns.js';

export interface InstrumentParts extends SessionParts {
  /** Without one a lost connection is lost for good, and no question is asked twice. */
  readonly wayBack?: WayBack;
}

/**
 * What is done first of all once an instrument answers again: looking how it was left, telling it what it may
 * have forgotten. What was found is put in words for a notice.
 */
export type LookFirst = (session: Session, tellAgain: () => Promise<void>) => Promise<string>;

/** What failed, and since when it has. */
interface Gap {
  readonly failure: RailproofError;
  readonly began: Seconds;
  readonly way: WayBack;
}

/**
 * One instrument of the bench, spoken to as its driver says. One act at a time; others wait their turn.
 *
 * With a way back, an act that fails by the line or by a reply is done again, on a new connection if need be;
 * every act does the same when it is done twice. Unless told to look otherwise, an instrument that answers
 * again is first prepared and told its settings again: it may have lost its power in between.
 */
export class Instrument {
  readonly role: Role;
  readonly driver: Driver;
  /** What it answered to the question who it is. */
  readonly identity: string;
  readonly #parts: InstrumentParts;
  readonly #clock: Clock;
  readonly #way: WayBack | undefined;
  readonly #turns = new Turns();
  readonly #settings = new Settings();
  #session: Session;
  #lookFirst: LookFirst = async (_, tellAgain) => {
    await tellAgain();
    return '';
  };
  /** Closed, or sought in vain: what fails now fails at once. */
  #over = false;

  private constructor(parts: InstrumentParts, session: Session) {
    this.role = parts.role;
    this.driver = parts.driver;
    this.identity = session.identity;
    this.#parts = parts;
    this.#clock = parts.clock;
    this.#session = session;
    const { wayBack } = parts;
    this.#way = wayBack && { ...wayBack, isWanted: () => !this.#over && wayBack.isWanted() };
  }

  /**
   * Opens it as `Session.open` does; when that fails the connection is closed, and nothing is tried again.
   * @throws as `Session.open`
   */
  static async open(parts: InstrumentParts): Promise<Instrument> {
    const known = { ...parts, signal: parts.signal ?? parts.wayBack?.signal };
    return new Instrument(known, await Session.open(known));
  }

  get address(): string {
    return this.#session.address;
  }

  /** Whether the driver says how to do it. */
  has(operation: string): boolean {
    return Object.hasOwn(this.driver.operations, operation);
  }

  /** Whether the driver says how to read it. */
  reads(reading: string): boolean {
    return Object.hasOwn(this.driver.readings, reading);
  }

  lookFirst(look: LookFirst): void {
    this.#lookFirst = look;
  }

  /** @throws as `Session.perform` */
  perform(operation: string, values: OperationValues = {}): Promise<void> {
    return this.#act(async (session) => {
      await session.perform(operation, values);
      this.#settings.note(operation, values);
    });
  }

  /** @throws as `Session.read` */
  read(reading: string): Promise<Measurement> {
    return this.#act((session) => session.read(reading));
  }

  /** @throws as `Session.flag` */
  flag(reading: string): Promise<boolean> {
    return this.#act((session) => session.flag(reading));
  }

  /** @throws as `Session.channel` */
  channel(reading: string): Promise<number | null> {
    return this.#act((session) => session.channel(reading));
  }

  /** The last that it is told: what the driver says is due then, and what gives it its front panel back. */
  release(): Promise<void> {
    return this.#turns.take(() => this.#session.release());
  }

  /** Leaves it as it is, with its front panel working again. Never rejects. */
  async leave(): Promise<void> {
    await this.#turns.take(() => this.#session.handBack()).catch(() => undefined);
    await this.close();
  }

  /** Never rejects; a question under way ends with ConnectionLostError. */
  close(): Promise<void> {
    this.#over = true;
    return this.#session.close();
  }

  #act<Result>(act: (session: Session) => Promise<Result>): Promise<Result> {
    return this.#turns.take(async () => {
      const began = this.#clock.now();
      try {
        return await act(this.#session);
      } catch (failure) {
        const way = this.#way;
        if (way?.isWanted() !== true || !isGap(failure)) throw failure;
        way.onGap();
        return await this.#throughGap(act, { failure, began, way });
      }
    });
  }

  async #throughGap<Result>(act: (session: Session) => Promise<Result>, gap: Gap): Promise<Result> {
    try {
      return await throughGap(gap.failure, { clock: this.#clock, way: gap.way }, (how, within) =>
        this.#again(act, gap, how, within),
      );
    } catch (error) {
      this.#over = true;
      throw error;
    }
  }

  async #again<Result>(
    act: (session: Session) => Promise<Result>,
    { failure, began, way }: Gap,
    how: Again,
    within: Seconds,
  ): Promise<Result> {
    const tell = (found: string): void => {
      way.onNotice(gapText(failure, how, this.#clock.now() - began, found));
    };
    if (how === 'open') await this.#reopen(way, within);
    else await this.#session.prepareAgain();
    const session = this.#session;
    const found = await this.#lookFirst(session, () => this.#tellAgain(session)).catch((error: unknown) => {
      if (!isGap(error)) tell('');
      throw error;
    });
    // Whoever wished to stop while it was sought wants nothing more of it, least of all its input on.
    if (isOver(way)) throw failure;
    const result = await act(session);
    tell(found);
    return result;
  }

  /** The same instrument must answer as before. */
  async #reopen(way: WayBack, within: Seconds): Promise<void> {
    await this.#session.close();
    const connection = await way.connect(within);
    if (isOver(way)) {
      await connection.close();
      throw new ConnectionLostError({ address: connection.address, reason: 'it was closed here' });
    }
    this.#session = await Session.open({
      ...this.#parts,
      connection,
      first: 'identity',
      identity: this.identity,
    });
  }

  async #tellAgain(session: Session): Promise<void> {
    for (const { operation, values } of this.#settings.inOrder()) await session.perform(operation, values);
  }
}
