import type { Message, Wire } from '../files/driver.js';
import type { Seconds } from '../quantity/quantity.js';
import { harmlessValues, whyLeftOut } from './harmless.js';
import { fillMessage } from './message.js';
import { isUnheard } from './gap.js';
import { ask, type Talk } from './tell.js';
import { cautiousGap, type TrialLine } from './trial-line.js';

/** How long a question takes to be answered, asked several times over. */
export interface RoundTrip {
  readonly question: string;
  readonly times: readonly Seconds[];
}

/** What an instrument needs after something was said to it. */
export interface Need {
  /** The shortest pause tried after which it missed nothing; undefined where none was long enough. */
  readonly pause: Seconds | undefined;
  /** How much later than usual it answered when it was asked without a pause; 0 where it did not. */
  readonly late: Seconds;
}

export type OperationNeed = Need & { readonly operation: string; readonly message: string };

/** The pauses that are tried, a series 1-2-5. */
export const pauses: readonly Seconds[] = [0, 0.005, 0.01, 0.02, 0.05, 0.1, 0.2, 0.5, 1];

const rounds = 3;
const repeats = 5;
/** What takes longer than this is not asked as often. */
const slow: Seconds = 1;
const repeatsOfSlow = 2;
/** Answers vary; only what comes by so much later than the slowest usual one is late. */
const noise: Seconds = 0.05;

/** Finds out how fast an instrument may be spoken to. Nothing is told but what has been told before, and did no harm. */
export class TrialPace {
  readonly #line: TrialLine;
  readonly #wire: Wire;
  /** How long it takes to say who it is. */
  #usual: Seconds = 0;
  /** Which of the pauses was long enough so far. */
  #longEnough = 0;

  /** `wire` is a way in which it answers beyond doubt. */
  constructor(line: TrialLine, wire: Wire) {
    this.#line = line;
    this.#wire = { ...wire, gap: Math.max(wire.gap, cautiousGap) };
  }

  /** How long answers take, of the identity and of these readings. */
  async roundTrips(readings: readonly string[]): Promise<readonly RoundTrip[]> {
    const { driver } = this.#line;
    const { identify } = driver;
    const identity = await this.#roundTrip(identify, ({ dialogue }) => dialogue.ask(identify));
    this.#usual = Math.max(0, ...identity.times);
    const trips = [identity];
    for (const name of readings) {
      const messages = driver.readings[name]?.ask ?? [];
      const question = messages.at(-1)?.text ?? '';
      if (trips.some((trip) => trip.question === question)) continue;
      const part = { driver: driver.name, section: 'readings', name } as const;
      trips.push(await this.#roundTrip(question, (talk) => ask(talk, messages, part)));
    }
    return trips.filter(({ times }) => times.length > 0);
  }

  /** What it needs after it has answered, before it hears the next question. */
  afterAnswer(): Promise<Need> {
    return this.#need([]);
  }

  /** What it needs after an operation. */
  async afterOperation(operation: string): Promise<OperationNeed | undefined> {
    const { driver } = this.#line;
    const messages = driver.operations[operation] ?? [];
    const last = messages.at(-1);
    // What says itself when it is ready needs no pause.
    if (last === undefined || last.untilReady === true || whyLeftOut(operation, driver) !== undefined) return;
    const values = harmlessValues(operation, driver);
    const filled = messages.map(({ text }) => ({ text: fillMessage(text, values) }));
    return { operation, message: last.text, ...(await this.#need(filled)) };
  }

  async #roundTrip(question: string, once: (talk: Talk) => Promise<unknown>): Promise<RoundTrip> {
    const times: Seconds[] = [];
    const talk = await this.#line.talkAnew(this.#wire);
    for (let turn = 0; turn < (Math.max(0, ...times) > slow ? repeatsOfSlow : repeats); turn++) {
      const mark = this.#line.mark;
      const answered = await orUnheard(once(talk));
      const time = answered === unheard ? undefined : this.#line.answeredIn(mark);
      if (time === undefined) break;
      times.push(time);
    }
    return { question, times };
  }

  /** Between two pauses of which the longer was long enough the one in the middle is tried next. */
  async #need(messages: readonly Message[]): Promise<Need> {
    const atOnce = await this.#answersAfter(messages, 0, this.#wire.timeout);
    if (atOnce !== undefined) {
      const late = atOnce - this.#usual;
      return { pause: 0, late: late > noise ? late : 0 };
    }
    const patience = Math.min(this.#wire.timeout, Math.max(0.3, 5 * this.#usual));
    // What was long enough after something else mostly is here too.
    const known = this.#longEnough;
    if (known > 0 && (await this.#answersAfter(messages, pauses[known] ?? 0, patience)) !== undefined) {
      return { pause: pauses[known], late: 0 };
    }
    let [missed, heard] = [known, pauses.length];
    while (heard - missed > 1) {
      // The longest first: it says whether any will do.
      const middle = heard === pauses.length ? pauses.length - 1 : Math.floor((missed + heard) / 2);
      const answered = await this.#answersAfter(messages, pauses[middle] ?? 0, patience);
      if (answered !== undefined) heard = middle;
      else if (middle === pauses.length - 1) break;
      else missed = middle;
    }
    this.#longEnough = heard < pauses.length ? heard : known;
    return { pause: pauses[heard], late: 0 };
  }

  /** How long the slowest of several answers took, each asked so long after what was said; undefined when one was missed. */
  async #answersAfter(
    messages: readonly Message[],
    pause: Seconds,
    timeout: Seconds,
  ): Promise<Seconds | undefined> {
    const { identify } = this.#line.driver;
    let slowest = 0;
    const { dialogue } = await this.#line.talkAnew({ ...this.#wire, gap: pause, timeout });
    for (let round = 0; round < rounds; round++) {
      for (const { text } of messages) await dialogue.tell(text);
      const mark = this.#line.mark;
      const answered = await orUnheard(dialogue.ask(identify));
      const time = answered === unheard ? undefined : this.#line.answeredIn(mark);
      if (time === undefined) {
        await this.#recover();
        return undefined;
      }
      slowest = Math.max(slowest, time);
    }
    return slowest;
  }

  /** What is late comes, and what made it deaf passes; then it must answer again. */
  async #recover(): Promise<void> {
    const { dialogue } = this.#line.talk(this.#wire);
    await this.#line.clock.sleep(1);
    dialogue.doubt();
    await dialogue.ask(this.#line.driver.identify);
  }
}

const unheard = Symbol('unheard');

function orUnheard(answer: Promise<unknown>): Promise<unknown> {
  return answer.catch((error: unknown) => {
    if (isUnheard(error)) return unheard;
    throw error;
  });
}
