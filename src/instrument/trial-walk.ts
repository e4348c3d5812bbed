import { placeholderOf } from '../files/driver-checks.js';
import type { Exchange } from '../files/driver-dialogue.js';
import type { Driver, DriverReading, Message, Wire } from '../files/driver.js';
import type { DriverPart } from './driver-part.js';
import { harmlessValues, whyLeftOut } from './harmless.js';
import { isIdentityFor } from './identity.js';
import { tellMakeSafe } from './make-safe.js';
import { fillMessage } from './message.js';
import { type Talk, tell } from './tell.js';
import { TrialErrors } from './trial-errors.js';
import type { TrialLine } from './trial-line.js';
import { type Proposal, withRests } from './trial-proposal.js';
import { TrialQuestions } from './trial-questions.js';
import type { TrialResult } from './trial-result.js';
import type { Switching } from './trial-switching.js';
import { visible } from './visible.js';

/** What an instrument is left with, whatever it was told on the way. */
const leftWith: Readonly<Partial<Record<Driver['role'], readonly string[]>>> = {
  load: ['current-mode', 'set-current', 'make-safe'],
  meter: ['measure-voltage', 'make-safe'],
};

/** A driver's messages, told and asked one by one, and what the instrument makes of each. */
export class TrialWalk {
  readonly #line: TrialLine;
  /** The channel that the exchanges are of, where the driver has several. */
  readonly #channel: { readonly channel?: number };
  /** What a meter was told last to measure. */
  #measures: string | undefined;
  #driver: Driver;
  #talk: Talk;
  #errors: TrialErrors;
  #questions: TrialQuestions;

  constructor(line: TrialLine, wire: Wire, channel: number | undefined) {
    this.#line = line;
    this.#channel = channel === undefined ? {} : { channel };
    this.#driver = line.driver;
    this.#talk = line.talk(wire);
    this.#errors = new TrialErrors(line, this.#talk);
    this.#questions = new TrialQuestions(line, this.#talk, this.#errors, this.#channel);
  }

  /** From now on it is left the time that it was found to need. */
  async keepTo({ gap, rests }: Proposal): Promise<void> {
    this.#driver = withRests(this.#driver, rests);
    const { wire } = this.#talk.driver;
    this.#talk = await this.#line.talkAnew({ ...wire, gap: Math.max(wire.gap, gap) });
    this.#errors = new TrialErrors(this.#line, this.#talk);
    this.#questions = new TrialQuestions(this.#line, this.#talk, this.#errors, this.#channel);
  }

  makeSafe(): Promise<void> {
    return tellMakeSafe(this.#talk.dialogue, this.#driver);
  }

  /** All that the driver says, in its order, but for how it ends. */
  async *messages(): AsyncGenerator<TrialResult, void, undefined> {
    const { errors, remote, prepare, operations, readings } = this.#driver;
    if (errors !== 'none') yield await this.#errors.before(errors);
    yield* this.#listed('remote', remote);
    yield* this.#listed('prepare', prepare);
    for (const operation of Object.keys(operations)) yield* this.operation(operation);
    for (const [name, reading] of Object.entries(readings)) {
      yield* this.#measuring(name);
      yield* this.#ranges(name, reading);
      yield await this.#questions.reading(name, reading);
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
    return this.#line.result({ part: 'identity', name: 'identity', sent: identify }, this.#talk, async () => {
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
    const messages = this.#driver.operations[on] ?? [];
    for (const [index, message] of messages.entries()) {
      const values = harmlessValues(on, this.#driver);
      const filled = { ...message, text: fillMessage(message.text, values) };
      yield await this.#told('operation', on, filled, this.#part('operations', on, inFile(messages, index)));
    }
    const reading = this.#driver.readings[state];
    if (reading?.kind === 'flag') yield await this.#questions.saysThatItIsOn(state, reading);
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
      const part = this.#part('operations', operation, inFile(messages, index));
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
    return this.#questions.saysThatItIsOff(name, reading);
  }

  async *#listed(
    part: 'remote' | 'prepare' | 'release',
    messages: readonly Message[],
  ): AsyncGenerator<TrialResult, void, undefined> {
    for (const [index, message] of messages.entries()) {
      yield await this.#told(part, part, message, this.#part(part, undefined, inFile(messages, index)));
    }
  }

  #local({ text, rest }: Message): Promise<TrialResult> {
    return this.#line.result({ part: 'local', name: 'local', sent: text }, this.#talk, async () => {
      await this.#talk.dialogue.tell(text, rest);
      return {
        received: undefined,
        verdict: 'unclear',
        detail: 'told last of all; nothing is asked after it',
      };
    });
  }

  async #told(
    part: TrialResult['part'],
    name: string,
    message: Message,
    of: DriverPart,
  ): Promise<TrialResult> {
    // What a question left there is none of what this message is to be blamed for.
    await this.#errors.forget();
    const at: DriverPart = message.selectsChannel === true ? this.#part('channels') : of;
    return this.#line.result({ part, name, sent: message.text, at }, this.#talk, async () => {
      await tell(this.#talk, [message], of);
      return this.#errors.ofWhatWasTold();
    });
  }

  /** A meter reads what it was told to measure, whatever it is asked. */
  async *#measuring(reading: string): AsyncGenerator<TrialResult, void, undefined> {
    const operation = `measure-${reading.replace(/^measures-/, '')}`;
    if (operation === this.#measures || this.#driver.operations[operation] === undefined) return;
    yield* this.operation(operation);
  }

  async *#ranges(name: string, reading: DriverReading): AsyncGenerator<TrialResult, void, undefined> {
    const ranges = reading.kind === 'number' ? (reading.ranges ?? []) : [];
    for (const [range, { select }] of ranges.entries()) {
      const part = { ...this.#part('readings', name), range };
      for (const message of select) yield await this.#told('reading', name, message, part);
    }
    const part = this.#part('readings', name);
    for (const message of reading.ask.slice(0, -1)) yield await this.#told('reading', name, message, part);
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

  #part(section: DriverPart['section'], name?: string, index?: number): DriverPart {
    return {
      ...{ driver: this.#driver.name, section },
      ...(name === undefined ? {} : { name }),
      ...(index === undefined ? {} : { index }),
    };
  }
}

/** Which of its messages it is in the file: those that choose a channel do not stand there. */
function inFile(messages: readonly Message[], index: number): number {
  return messages.slice(0, index).filter(({ selectsChannel }) => selectsChannel !== true).length;
}

function leftOut(operation: string, message: string, reason: string): TrialResult {
  return {
    ...{ part: 'operation', name: operation, sent: message, seconds: 0 },
    ...{ received: undefined, verdict: 'not-sent', detail: reason, bytes: [], exchanges: [] },
  };
}
