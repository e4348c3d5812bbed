import type { EventClock } from '../clock/event-clock.js';
import type { Driver, Wire } from '../files/driver.js';
import type { Exchange } from '../files/driver-dialogue.js';
import type { Seconds } from '../quantity/quantity.js';
import type { Connection } from './connection.js';
import type { Received, Sent, TraceEntry } from './dialogue-record.js';
import { Dialogue } from './dialogue.js';
import { NotReadyError } from './instrument-errors.js';
import { isIdentityFor } from './identity.js';
import {
  InstrumentSilentError,
  OutOfStepError,
  ReplyNotUnderstoodError,
  ReplyTooLongError,
} from './reply-errors.js';
import type { Talk } from './tell.js';
import { tracedConnection } from './traced-connection.js';
import type { TrialResult } from './trial-result.js';
import { visible } from './visible.js';

/** Nobody knows yet how fast it takes what it is told. */
export const cautiousGap: Seconds = 0.1;

/** What came of a message, but for the time that it took and the bytes that went over the line. */
export type Answer = Pick<TrialResult, 'received' | 'verdict' | 'detail'> & {
  readonly exchanges?: readonly Exchange[];
};

export interface TrialLineParts {
  readonly driver: Driver;
  readonly connection: Connection;
  readonly clock: EventClock;
  /** Told of every byte. */
  readonly trace?: ((entry: TraceEntry) => void) | undefined;
}

/** The line to an instrument on trial: every byte on it is noted, and how it is spoken over may change. */
export class TrialLine {
  readonly driver: Driver;
  readonly connection: Connection;
  readonly clock: EventClock;
  readonly #noted: (Sent | Received)[] = [];

  constructor({ driver, connection, clock, trace }: TrialLineParts) {
    this.driver = driver;
    this.clock = clock;
    this.connection = tracedConnection(connection, clock, (entry) => {
      trace?.(entry);
      if (entry.kind === 'sent' || entry.kind === 'received') this.#noted.push(entry);
    });
  }

  /** A dialogue of its own over the same line; what is under way in another must have come to its end. */
  talk(wire: Wire): Talk {
    const { connection, clock } = this;
    const driver = { ...this.driver, wire };
    const { identify } = driver;
    const isIdentity = isIdentityFor(driver);
    return { driver, clock, dialogue: new Dialogue({ connection, wire, clock, identify, isIdentity }) };
  }

  /** As `talk`, once so long has passed that the first message of it comes to one that listens again. */
  async talkAnew(wire: Wire): Promise<Talk> {
    await this.clock.sleep(cautiousGap);
    return this.talk(wire);
  }

  /** How much has been noted so far. */
  get mark(): number {
    return this.#noted.length;
  }

  since(mark: number): readonly (Sent | Received)[] {
    return this.#noted.slice(mark);
  }

  /** From the last message that was sent to the last byte that came after it; undefined when none did. */
  answeredIn(mark: number): Seconds | undefined {
    const noted = this.since(mark);
    const sent = noted.findLast(({ kind }) => kind === 'sent');
    const last = noted.at(-1);
    return sent === undefined || last?.kind !== 'received' ? undefined : last.t - sent.t;
  }

  /** Does something, and says what came of it whatever fails but the line itself. @throws ConnectionLostError */
  async result(
    head: Pick<TrialResult, 'part' | 'name' | 'sent' | 'at'>,
    { dialogue }: Talk,
    act: () => Promise<Answer>,
  ): Promise<TrialResult> {
    const began = this.clock.now();
    const mark = this.mark;
    const { exchanges = [], ...answer } = await act().catch((error: unknown) => {
      if (error instanceof ReplyNotUnderstoodError) dialogue.doubt();
      return failed(error);
    });
    const waited = answer.verdict === 'silent' ? this.clock.now() - began : 0;
    const seconds = this.answeredIn(mark) ?? waited;
    return { ...head, ...answer, seconds, bytes: this.since(mark), exchanges };
  }
}

/** As the error has it, without what it says after it. */
export function expectedOf({ expected }: ReplyNotUnderstoodError): string {
  return `expected ${expected.replace(/,$/, '')}`;
}

/** What was told just before may have made it deaf for a moment: only twice unheard is silence. */
export async function atLast<Result>(question: () => Promise<Result>): Promise<Result> {
  return question().catch((error: unknown) => {
    if (isWithoutAnswer(error)) return question();
    throw error;
  });
}

/** Not a byte came. */
export function isWithoutAnswer(error: unknown): boolean {
  return error instanceof InstrumentSilentError && error.begun === '';
}

function failed(error: unknown): Answer {
  if (error instanceof InstrumentSilentError) {
    const received = error.begun === '' ? undefined : error.begun;
    const missing = received === undefined ? 'was not answered' : 'was answered without an end';
    return { received, verdict: 'silent', detail: `"${visible(error.question)}" ${missing} in time` };
  }
  if (error instanceof OutOfStepError) {
    return { received: undefined, verdict: 'silent', detail: 'it could not be brought back in step' };
  }
  if (error instanceof NotReadyError) {
    const detail = `"${visible(error.question)}" did not say in time that it is ready`;
    return { received: error.answer, verdict: 'silent', detail };
  }
  if (error instanceof ReplyNotUnderstoodError) {
    return { received: error.reply, verdict: 'unclear', detail: expectedOf(error) };
  }
  if (error instanceof ReplyTooLongError) {
    const detail = `more than ${error.limit} bytes without an end`;
    return { received: error.begins, verdict: 'unclear', detail };
  }
  throw error;
}
