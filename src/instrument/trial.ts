import type { Clock } from '../clock/clock.js';
import type { Driver, DriverReading } from '../files/driver.js';
import type { Seconds } from '../quantity/quantity.js';
import type { Connection } from './connection.js';
import { Dialogue } from './dialogue.js';
import { readErrorQueue } from './error-queue.js';
import { isIdentityFor } from './identity.js';
import { fillMessage, type OperationValues } from './message.js';
import { readFlag, readNumber } from './reading.js';
import {
  InstrumentSilentError,
  OutOfStepError,
  ReplyNotUnderstoodError,
  ReplyTooLongError,
} from './reply-errors.js';
import type { Measurement } from './scpi-number.js';
import { visible } from './visible.js';

export interface TrialResult {
  readonly part: 'identity' | 'error-queue' | 'prepare' | 'operation' | 'reading' | 'proof';
  /** Of the operation or the reading; of the part otherwise. */
  readonly name: string;
  readonly sent: string;
  /** Escaped and cut; undefined when nothing came. */
  readonly received: string | undefined;
  /** `unclear` where a reply makes no sense, and where there is no error queue that could tell. */
  readonly verdict: 'understood' | 'refused' | 'silent' | 'unclear' | 'not-sent';
  readonly detail: string;
  readonly seconds: Seconds;
}

type Answer = Pick<TrialResult, 'received' | 'verdict' | 'detail'>;

/** What would connect or energise something; a trial leaves these out. */
const leftOut: Readonly<Record<string, string>> = {
  'input-on': 'would switch on',
  'output-on': 'would switch on',
  'close-channel': 'would connect something',
};

/**
 * Walks through a driver message by message and tells what the instrument makes of each, with the input
 * kept off: it is made safe first, nothing that switches on is sent, set-points are zero, and at the end it
 * is made safe again and asked whether it is off. When the identity is not answered the walk ends, since
 * nothing that came later could be told apart. The connection is left open.
 * @throws ConnectionLostError
 */
export async function* tryDriver(parts: {
  readonly driver: Driver;
  readonly connection: Connection;
  readonly clock: Clock;
}): AsyncGenerator<TrialResult, void, undefined> {
  const { driver } = parts;
  const trial = new Trial(parts);
  let safe = false;
  await trial.makeSafe();
  try {
    const identity = await trial.identity();
    yield identity;
    if (identity.verdict === 'silent') return;
    if (driver.errors !== 'none') yield await trial.errorQueue(driver.errors);
    for (const message of driver.prepare) yield await trial.told('prepare', 'prepare', message);
    for (const [operation, messages] of Object.entries(driver.operations)) {
      for (const message of messages) yield await trial.operation(operation, message);
    }
    for (const [name, reading] of Object.entries(driver.readings)) yield* trial.reading(name, reading);
    for (const message of driver.operations['make-safe'] ?? []) {
      yield await trial.told('operation', 'make-safe', message);
    }
    safe = true;
    const proof = driver.readings[driver.role === 'source' ? 'output-state' : 'input-state'];
    if (proof?.kind === 'flag') yield await trial.proofThatItIsOff(proof);
  } finally {
    if (!safe) await trial.makeSafe().catch(() => undefined);
  }
}

class Trial {
  readonly #driver: Driver;
  readonly #clock: Clock;
  readonly #dialogue: Dialogue;
  readonly #isIdentity: (reply: string) => boolean;

  constructor({ driver, connection, clock }: { driver: Driver; connection: Connection; clock: Clock }) {
    this.#driver = driver;
    this.#clock = clock;
    this.#isIdentity = isIdentityFor(driver);
    this.#dialogue = new Dialogue({
      connection,
      wire: driver.wire,
      clock,
      identify: driver.identify,
      isIdentity: this.#isIdentity,
    });
  }

  async makeSafe(): Promise<void> {
    for (const message of this.#driver.operations['make-safe'] ?? []) await this.#dialogue.tell(message);
  }

  identity(): Promise<TrialResult> {
    return this.#timed('identity', 'identity', this.#driver.identify, async () => {
      const reply = await this.#dialogue.ask(this.#driver.identify);
      if (this.#isIdentity(reply)) return understood(reply);
      return {
        received: visible(reply),
        verdict: 'unclear',
        detail: 'not an identity that the driver is for',
      };
    });
  }

  errorQueue(errors: Exclude<Driver['errors'], 'none'>): Promise<TrialResult> {
    return this.#timed('error-queue', 'errors', errors.ask, async () => {
      const { entries, clear } = await readErrorQueue(this.#dialogue, errors);
      const received = entries.map(({ number, text }) => `${number} "${visible(text)}"`).join(', ');
      if (clear)
        return {
          ...understood(received),
          detail: entries.length > 0 ? 'errors from before, now cleared' : 'no errors',
        };
      return { received, verdict: 'unclear', detail: 'it does not get clear; does "clear" fit its answer?' };
    });
  }

  operation(operation: string, message: string): Promise<TrialResult> {
    const reason = leftOut[operation];
    if (reason === undefined) {
      return this.told('operation', operation, fillMessage(message, this.#harmless(operation)));
    }
    const answer: Answer = { received: undefined, verdict: 'not-sent', detail: reason };
    return Promise.resolve({ part: 'operation', name: operation, sent: message, ...answer, seconds: 0 });
  }

  told(part: TrialResult['part'], name: string, message: string): Promise<TrialResult> {
    return this.#timed(part, name, message, async () => {
      await this.#dialogue.tell(message);
      if (this.#driver.errors === 'none') {
        return {
          received: undefined,
          verdict: 'unclear',
          detail: 'sent; there is no error queue to ask about it',
        };
      }
      const { entries } = await readErrorQueue(this.#dialogue, this.#driver.errors);
      if (entries.length === 0) return { received: undefined, verdict: 'understood', detail: '' };
      const complaint = entries.map(({ number, text }) => `${number} "${visible(text)}"`).join(', ');
      return { received: complaint, verdict: 'refused', detail: 'in its error queue' };
    });
  }

  async *reading(name: string, reading: DriverReading): AsyncGenerator<TrialResult, void, undefined> {
    for (const message of reading.ask.slice(0, -1)) yield await this.told('reading', name, message);
    const question = reading.ask.at(-1) ?? '';
    yield await this.#timed('reading', name, question, async () => {
      const reply = await this.#dialogue.ask(question);
      return { ...understood(reply), detail: this.#meaning(reply, reading, question) };
    });
  }

  proofThatItIsOff(reading: Extract<DriverReading, { kind: 'flag' }>): Promise<TrialResult> {
    const question = reading.ask.at(-1) ?? '';
    return this.#timed('proof', 'it is off', question, async () => {
      for (const message of reading.ask.slice(0, -1)) await this.#dialogue.tell(message);
      const reply = await this.#dialogue.ask(question);
      const on = readFlag(reply, reading, { address: this.#dialogue.address, question });
      if (!on) return { ...understood(reply), detail: 'off' };
      return {
        received: visible(reply),
        verdict: 'refused',
        detail: 'it is still on: switch it off by hand',
      };
    });
  }

  #meaning(reply: string, reading: DriverReading, question: string): string {
    const about = { address: this.#dialogue.address, question };
    if (reading.kind === 'flag') return readFlag(reply, reading, about) ? 'yes' : 'no';
    return measured(readNumber(reply, reading, about));
  }

  /** Zero for what sets; for what protects the rating, so that no protection is left at zero. */
  #harmless(operation: string): OperationValues {
    if (!operation.startsWith('protect-')) return { amps: 0, volts: 0, watts: 0, channel: 1 };
    const { current, voltage, power } = this.#driver.ratings;
    return { amps: current ?? 0, volts: voltage ?? 0, watts: power ?? 0, channel: 1 };
  }

  async #timed(
    part: TrialResult['part'],
    name: string,
    sent: string,
    act: () => Promise<Answer>,
  ): Promise<TrialResult> {
    const began = this.#clock.now();
    const answer = await act().catch((error: unknown) => this.#failed(error));
    return { part, name, sent, ...answer, seconds: this.#clock.now() - began };
  }

  #failed(error: unknown): Answer {
    if (error instanceof InstrumentSilentError) {
      const received = error.begun === '' ? undefined : error.begun;
      return { received, verdict: 'silent', detail: `"${visible(error.question)}" was not answered in time` };
    }
    if (error instanceof OutOfStepError) {
      return { received: undefined, verdict: 'silent', detail: 'it could not be brought back in step' };
    }
    if (error instanceof ReplyNotUnderstoodError) {
      this.#dialogue.doubt();
      return { received: error.reply, verdict: 'unclear', detail: `expected ${error.expected}` };
    }
    if (error instanceof ReplyTooLongError) {
      return {
        received: error.begins,
        verdict: 'unclear',
        detail: `more than ${error.limit} bytes without an end`,
      };
    }
    throw error;
  }
}

function understood(reply: string): Answer {
  return { received: visible(reply), verdict: 'understood', detail: '' };
}

function measured(measurement: Measurement): string {
  return measurement.kind === 'value' ? String(measurement.value) : measurement.kind;
}
