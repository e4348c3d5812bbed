import type { Driver, DriverReading, Message, Wire } from '../files/driver.js';
import type { Exchange } from '../files/driver-dialogue.js';
import { meaningText } from '../files/driver-dialogue-text.js';
import { placeholderOf } from '../files/driver-checks.js';
import type { DriverPart } from './driver-part.js';
import { fateOf, readErrors, type ReportedError } from './error-report.js';
import { harmlessValues, whyLeftOut } from './harmless.js';
import { isIdentityFor } from './identity.js';
import { tellMakeSafe } from './make-safe.js';
import { fillMessage } from './message.js';
import { meaningOf } from './reading-meaning.js';
import { readFlag, type About } from './reading.js';
import { InstrumentSilentError, ReplyNotUnderstoodError } from './reply-errors.js';
import { ask, type Talk, tell } from './tell.js';
import type { Switching } from './trial-switching.js';
import type { Answer, TrialLine } from './trial-line.js';
import { isProven, type TrialResult } from './trial-result.js';
import { visible } from './visible.js';

/** What an instrument is left with, whatever it was told on the way. */
const leftWith: Readonly<Partial<Record<Driver['role'], readonly string[]>>> = {
  load: ['current-mode', 'set-current', 'make-safe'],
  meter: ['measure-voltage', 'make-safe'],
};

/** A driver's messages, told and asked one by one, and what the instrument makes of each. */
export class TrialWalk {
  readonly #driver: Driver;
  readonly #line: TrialLine;
  /** The channel that the exchanges are of, where the driver has several. */
  readonly #channel: { readonly channel?: number };
  /** What a meter was told last to measure. */
  #measures: string | undefined;
  #talk: Talk;

  constructor(line: TrialLine, wire: Wire, channel: number | undefined) {
    this.#driver = line.driver;
    this.#line = line;
    this.#channel = channel === undefined ? {} : { channel };
    this.#talk = line.talk(wire);
  }

  /** From now on it is spoken to in that way. */
  speak(wire: Wire): void {
    this.#talk = this.#line.talk(wire);
  }

  makeSafe(): Promise<void> {
    return tellMakeSafe(this.#talk.dialogue, this.#driver);
  }

  /** All that the driver says, in its order, but for how it ends. */
  async *messages(): AsyncGenerator<TrialResult, void, undefined> {
    const { errors, remote, prepare, operations, readings } = this.#driver;
    if (errors !== 'none') yield await this.#errorQueue(errors);
    yield* this.#listed('remote', remote);
    yield* this.#listed('prepare', prepare);
    for (const operation of Object.keys(operations)) yield* this.operation(operation);
    for (const [name, reading] of Object.entries(readings)) {
      yield* this.#measuring(name);
      yield* this.#reading(name, reading);
    }
  }

  async *ending(): AsyncGenerator<TrialResult, void, undefined> {
    for (const operation of leftWith[this.#driver.role] ?? ['make-safe']) yield* this.operation(operation);
    yield* this.#listed('release', this.#driver.release);
    const proof = await this.proofThatItIsOff();
    if (proof) yield proof;
    for (const message of this.#driver.local) yield await this.#local(message);
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
    const { identify } = this.#driver;
    return this.#result('identity', 'identity', identify, async () => {
      const reply = await this.#talk.dialogue.ask(identify);
      const fits = isIdentityFor(this.#driver)(reply);
      const is = fits ? 'understood' : 'not-understood';
      return {
        received: visible(reply),
        verdict: fits ? 'understood' : 'unclear',
        detail: fits ? '' : 'not an identity that the driver is for',
        exchanges: [{ kind: 'identity', answer: reply, is }],
      };
    });
  }

  /** Switches on, at nothing, for as long as it takes to ask whether it is on. Whoever calls sees to it that it is off. */
  async *switchOn({ first, on, off, state }: Switching): AsyncGenerator<TrialResult, void, undefined> {
    for (const operation of first) yield* this.operation(operation);
    for (const [index, message] of (this.#driver.operations[on] ?? []).entries()) {
      const values = harmlessValues(on, this.#driver);
      const filled = { ...message, text: fillMessage(message.text, values) };
      yield await this.#told('operation', on, filled, { ...this.#part('operations', on), index });
    }
    const reading = this.#driver.readings[state];
    if (reading?.kind === 'flag') yield await this.#saysThatItIsOn(state, reading);
    yield* this.operation(off);
  }

  /** The messages of an operation, with values that do no harm. */
  async *operation(operation: string): AsyncGenerator<TrialResult, void, undefined> {
    const messages = this.#driver.operations[operation] ?? [];
    if (operation.startsWith('measure-')) this.#measures = operation;
    const reason = whyLeftOut(operation, this.#driver);
    if (reason !== undefined) {
      for (const { text } of messages) yield leftOut(operation, text, reason);
      return;
    }
    const values = harmlessValues(operation, this.#driver);
    const filled = messages.map((message) => ({ ...message, text: fillMessage(message.text, values) }));
    for (const [index, message] of filled.entries()) {
      const part: DriverPart = { ...this.#part('operations', operation), index };
      const result = await this.#told('operation', operation, message, part);
      const isLast = index === filled.length - 1;
      yield isLast
        ? { ...result, exchanges: [...result.exchanges, this.#performed(operation, filled)] }
        : result;
    }
  }

  /** Undefined where there is nothing that could be on, or nothing said of how to ask. */
  async proofThatItIsOff(): Promise<TrialResult | undefined> {
    const name = this.#driver.role === 'source' ? 'output-state' : 'input-state';
    const reading = this.#driver.readings[name];
    if (reading?.kind !== 'flag') return undefined;
    const question = questionOf(reading);
    const proof = await this.#result('proof', 'it is off', question, async () => {
      const part = this.#part('readings', name);
      const reply = await this.#atLast(() => ask(this.#talk, reading.ask, part));
      const on = readFlag(reply, reading, this.#about(question, part));
      if (!on) return { received: visible(reply), verdict: 'understood', detail: 'off' };
      return { received: visible(reply), verdict: 'refused', detail: 'it says that it is on' };
    });
    if (isProven(proof)) return proof;
    return { ...proof, detail: `${proof.detail}; nothing more is tried: switch it off by hand` };
  }

  async *#listed(
    part: 'remote' | 'prepare' | 'release',
    messages: readonly Message[],
  ): AsyncGenerator<TrialResult, void, undefined> {
    for (const [index, message] of messages.entries()) {
      yield await this.#told(part, part, message, { ...this.#part(part), index });
    }
  }

  #local({ text, rest }: Message): Promise<TrialResult> {
    return this.#result('local', 'local', text, async () => {
      await this.#talk.dialogue.tell(text, rest);
      return {
        received: undefined,
        verdict: 'unclear',
        detail: 'told last of all; nothing is asked after it',
      };
    });
  }

  #errorQueue({ ask: question }: Exclude<Driver['errors'], 'none'>): Promise<TrialResult> {
    return this.#result('error-queue', 'errors', question, async () => {
      const { entries, clear } = await readErrors(this.#talk.dialogue, this.#driver);
      const received = listed(entries);
      const exchanges = entries.map((entry) => this.#reported(entry));
      if (clear) {
        const detail = entries.length > 0 ? 'errors from before, now cleared' : 'no errors';
        return { received, verdict: 'understood', detail, exchanges };
      }
      return {
        ...{ received, verdict: 'unclear', exchanges: [] },
        detail: 'it does not get clear; does "clear" fit its answer?',
      };
    });
  }

  #told(part: TrialResult['part'], name: string, message: Message, of: DriverPart): Promise<TrialResult> {
    return this.#result(part, name, message.text, async () => {
      await tell(this.#talk, [message], of);
      if (this.#driver.errors === 'none') {
        const detail = 'sent; there is no error queue to ask about it';
        return { received: undefined, verdict: 'unclear', detail };
      }
      const { entries } = await this.#atLast(() => readErrors(this.#talk.dialogue, this.#driver));
      if (entries.length === 0) return { received: undefined, verdict: 'understood', detail: '' };
      const exchanges = entries.map((entry) => this.#reported(entry));
      const isHarmless = exchanges.every((each) => each.kind === 'errors' && each.is === 'harmless');
      return isHarmless
        ? {
            received: listed(entries),
            verdict: 'understood',
            detail: 'what its driver calls harmless',
            exchanges,
          }
        : { received: listed(entries), verdict: 'refused', detail: 'in its error queue', exchanges };
    });
  }

  /** A meter reads what it was told to measure, whatever it is asked. */
  async *#measuring(reading: string): AsyncGenerator<TrialResult, void, undefined> {
    const operation = `measure-${reading.replace(/^measures-/, '')}`;
    if (operation === this.#measures || this.#driver.operations[operation] === undefined) return;
    yield* this.operation(operation);
  }

  async *#reading(name: string, reading: DriverReading): AsyncGenerator<TrialResult, void, undefined> {
    const part = this.#part('readings', name);
    const ranges = reading.kind === 'number' ? (reading.ranges ?? []) : [];
    for (const [range, { select }] of ranges.entries()) {
      for (const message of select) yield await this.#told('reading', name, message, { ...part, range });
    }
    for (const message of reading.ask.slice(0, -1)) yield await this.#told('reading', name, message, part);
    yield await this.#asked(name, reading, part);
  }

  #asked(name: string, reading: DriverReading, part: DriverPart): Promise<TrialResult> {
    const question = questionOf(reading);
    return this.#result('reading', name, question, async () => {
      const reply = await this.#atLast(() => ask(this.#talk, reading.ask.slice(-1), part));
      const heard = (is: Extract<Exchange, { kind: 'reading' }>['heard']): readonly Exchange[] => [
        {
          ...{ kind: 'reading', reading: name, sends: reading.ask.map(({ text }) => text) },
          ...this.#channel,
          ...(is === undefined ? {} : { heard: is }),
        },
      ];
      try {
        const is = meaningOf(reply, reading, this.#about(question, part));
        const exchanges = heard({ answer: reply, is });
        return { received: visible(reply), verdict: 'understood', detail: meaningText(is), exchanges };
      } catch (error) {
        if (!(error instanceof ReplyNotUnderstoodError)) throw error;
        this.#talk.dialogue.doubt();
        const exchanges = heard({ answer: reply, is: { kind: 'not-understood' } });
        return {
          ...{ received: visible(reply), verdict: 'unclear', exchanges },
          detail: `expected ${error.expected}`,
        };
      }
    });
  }

  async #saysThatItIsOn(
    name: string,
    reading: Extract<DriverReading, { kind: 'flag' }>,
  ): Promise<TrialResult> {
    const asked = await this.#asked(name, reading, this.#part('readings', name));
    if (asked.verdict !== 'understood' || asked.detail === 'yes') return asked;
    return { ...asked, verdict: 'refused', detail: 'it says that it is off' };
  }

  /** What was told just before may have made it deaf for a moment: only twice unheard is silence. */
  async #atLast<Result>(question: () => Promise<Result>): Promise<Result> {
    return question().catch((error: unknown) => {
      if (error instanceof InstrumentSilentError && error.begun === '') return question();
      throw error;
    });
  }

  #result(
    part: TrialResult['part'],
    name: string,
    sent: string,
    act: () => Promise<Answer>,
  ): Promise<TrialResult> {
    return this.#line.result({ part, name, sent }, this.#talk, act);
  }

  #performed(operation: string, messages: readonly Message[]): Exchange {
    const placeholder = placeholderOf[operation]?.slice(1, -1);
    const values: Readonly<Record<string, number | undefined>> = {
      ...harmlessValues(operation, this.#driver),
    };
    const value = placeholder === undefined ? undefined : values[placeholder];
    return {
      ...{ kind: 'operation', operation, sends: messages.map(({ text }) => text) },
      ...(value === undefined ? {} : { value }),
      ...this.#channel,
    };
  }

  #reported(entry: ReportedError): Exchange {
    const { errors } = this.#driver;
    return { kind: 'errors', answer: entry.said, is: errors === 'none' ? 'error' : fateOf(entry, errors) };
  }

  #part(section: DriverPart['section'], name?: string): DriverPart {
    return { driver: this.#driver.name, section, ...(name === undefined ? {} : { name }) };
  }

  #about(question: string, part: DriverPart): About {
    return { address: this.#talk.dialogue.address, question, part };
  }
}

function leftOut(operation: string, message: string, reason: string): TrialResult {
  return {
    ...{ part: 'operation', name: operation, sent: message, seconds: 0 },
    ...{ received: undefined, verdict: 'not-sent', detail: reason, bytes: [], exchanges: [] },
  };
}

function questionOf(reading: DriverReading): string {
  return reading.ask.at(-1)?.text ?? '';
}

function listed(entries: readonly ReportedError[]): string {
  return entries.map(({ number, text }) => `${number} "${visible(text)}"`).join(', ');
}
