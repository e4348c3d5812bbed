import type { Clock } from '../clock/clock.js';
import type { Driver, DriverReading } from '../files/driver.js';
import type { Seconds } from '../quantity/quantity.js';
import type { Connection } from './connection.js';
import { Dialogue } from './dialogue.js';
import { readErrorQueue } from './error-queue.js';
import { harmlessValues, whyLeftOut } from './harmless.js';
import { isIdentityFor } from './identity.js';
import { tellMakeSafe } from './make-safe.js';
import { fillMessage } from './message.js';
import { readChannel, readFlag, readNumber } from './reading.js';
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

/** What an instrument is left with, whatever it was told on the way. */
const leftWith: Readonly<Partial<Record<Driver['role'], readonly string[]>>> = {
  load: ['current-mode', 'set-current', 'make-safe'],
  meter: ['measure-voltage', 'make-safe'],
};

/** Whether there was nothing to prove, or it is off beyond doubt. */
export function isProven(proof: TrialResult | undefined): boolean {
  return proof === undefined || proof.verdict === 'understood';
}

export interface TrialWalkParts {
  readonly driver: Driver;
  readonly connection: Connection;
  readonly clock: Clock;
}

/** A driver's messages, told and asked one by one, and what the instrument makes of each. */
export class TrialWalk {
  readonly #driver: Driver;
  readonly #clock: Clock;
  readonly #dialogue: Dialogue;
  readonly #isIdentity: (reply: string) => boolean;

  constructor({ driver, connection, clock }: TrialWalkParts) {
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

  makeSafe(): Promise<void> {
    return tellMakeSafe(this.#dialogue, this.#driver);
  }

  /** All that the driver says, in its order, but for how it ends. */
  async *messages(): AsyncGenerator<TrialResult, void, undefined> {
    const { errors, prepare, operations, readings } = this.#driver;
    if (errors !== 'none') yield await this.errorQueue(errors);
    for (const { text } of prepare) yield await this.told('prepare', 'prepare', text);
    for (const operation of Object.keys(operations)) yield* this.operation(operation);
    for (const [name, reading] of Object.entries(readings)) yield* this.reading(name, reading);
  }

  async *ending(): AsyncGenerator<TrialResult, void, undefined> {
    for (const operation of leftWith[this.#driver.role] ?? ['make-safe']) yield* this.operation(operation);
    const proof = await this.proofThatItIsOff();
    if (proof) yield proof;
  }

  /** Nobody listens any more, so what fails is passed over and the rest is told all the same. */
  async endUnheard(): Promise<void> {
    await this.makeSafe().catch(() => undefined);
    const results = this.ending();
    for (;;) {
      const next = await results.next().catch(() => undefined);
      if (next === undefined || next.done === true) return;
    }
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

  async *operation(operation: string): AsyncGenerator<TrialResult, void, undefined> {
    const reason = whyLeftOut(operation, this.#driver);
    for (const { text: message } of this.#driver.operations[operation] ?? []) {
      yield reason === undefined
        ? await this.told(
            'operation',
            operation,
            fillMessage(message, harmlessValues(operation, this.#driver)),
          )
        : {
            ...{ part: 'operation', name: operation, sent: message, seconds: 0 },
            ...{ received: undefined, verdict: 'not-sent', detail: reason },
          };
    }
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
    for (const { text } of reading.ask.slice(0, -1)) yield await this.told('reading', name, text);
    const question = reading.ask.at(-1)?.text ?? '';
    yield await this.#timed('reading', name, question, async () => {
      const reply = await this.#dialogue.ask(question);
      return { ...understood(reply), detail: this.#meaning(reply, reading, question) };
    });
  }

  /** Undefined where there is nothing that could be on, or nothing said of how to ask. */
  async proofThatItIsOff(): Promise<TrialResult | undefined> {
    const reading = this.#driver.readings[this.#driver.role === 'source' ? 'output-state' : 'input-state'];
    if (reading?.kind !== 'flag') return undefined;
    const question = reading.ask.at(-1)?.text ?? '';
    const proof = await this.#timed('proof', 'it is off', question, async () => {
      for (const { text } of reading.ask.slice(0, -1)) await this.#dialogue.tell(text);
      const reply = await this.#dialogue.ask(question);
      const on = readFlag(reply, reading, { address: this.#dialogue.address, question });
      if (!on) return { ...understood(reply), detail: 'off' };
      return { received: visible(reply), verdict: 'refused', detail: 'it says that it is on' };
    });
    if (isProven(proof)) return proof;
    return { ...proof, detail: `${proof.detail}; nothing more is tried: switch it off by hand` };
  }

  #meaning(reply: string, reading: DriverReading, question: string): string {
    const about = { address: this.#dialogue.address, question };
    if (reading.kind === 'flag') return readFlag(reply, reading, about) ? 'yes' : 'no';
    if (reading.kind === 'channel') return String(readChannel(reply, reading, about) ?? 'none');
    return measured(readNumber(reply, reading, about));
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
