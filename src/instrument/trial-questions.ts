import { meaningText } from '../files/driver-dialogue-text.js';
import type { Exchange } from '../files/driver-dialogue.js';
import type { DriverReading } from '../files/driver.js';
import type { DriverPart } from './driver-part.js';
import { meaningOf } from './reading-meaning.js';
import { readFlag, type About } from './reading.js';
import { ReplyNotUnderstoodError } from './reply-errors.js';
import { ask, type Talk } from './tell.js';
import type { TrialErrors } from './trial-errors.js';
import { type Answer, atLast, expectedOf, isWithoutAnswer, type TrialLine } from './trial-line.js';
import { isProven, type TrialResult } from './trial-result.js';
import { visible } from './visible.js';

type Flag = Extract<DriverReading, { kind: 'flag' }>;

/** What an instrument on trial is asked to read or to say of itself, and what is made of its answers. */
export class TrialQuestions {
  readonly #line: TrialLine;
  readonly #talk: Talk;
  readonly #errors: TrialErrors;
  /** The channel that the exchanges are of, where the driver has several. */
  readonly #channel: { readonly channel?: number };

  constructor(line: TrialLine, talk: Talk, errors: TrialErrors, channel: { readonly channel?: number }) {
    this.#line = line;
    this.#talk = talk;
    this.#errors = errors;
    this.#channel = channel;
  }

  /** The last message of a reading; what is told before it has been told. */
  async reading(name: string, reading: DriverReading): Promise<TrialResult> {
    await this.#errors.forget();
    const part = this.#part(name);
    const question = questionOf(reading);
    return this.#line.result({ part: 'reading', name, sent: question, at: part }, this.#talk, () =>
      this.#unlessRefused(
        () => ask(this.#talk, reading.ask.slice(-1), part),
        (reply) => this.#understood(reply, name, reading),
      ),
    );
  }

  async saysThatItIsOn(name: string, reading: Flag): Promise<TrialResult> {
    const asked = await this.reading(name, reading);
    if (asked.verdict !== 'understood' || asked.detail === 'yes') return asked;
    return { ...asked, verdict: 'refused', detail: 'it says that it is off' };
  }

  /** An instrument that did not take the choice of its channel speaks of another one, of which nothing is to be believed. */
  async saysThatItIsOff(name: string, reading: Flag): Promise<TrialResult> {
    const choosesChannel = reading.ask.some(({ selectsChannel }) => selectsChannel === true);
    if (choosesChannel) await this.#errors.forget();
    const part = this.#part(name);
    const question = questionOf(reading);
    const proof = await this.#line.result(
      { part: 'proof', name: 'it is off', sent: question, at: part },
      this.#talk,
      async () => {
        const reply = await atLast(() => ask(this.#talk, reading.ask, part));
        const received = visible(reply);
        if (readFlag(reply, reading, this.#about(question, part))) {
          return { received, verdict: 'refused', detail: 'it says that it is on' };
        }
        const complaint = choosesChannel ? await this.#errors.complaint() : undefined;
        if (complaint?.verdict !== 'refused') return { received, verdict: 'understood', detail: 'off' };
        const detail = `its channel was not chosen: ${complaint.received ?? ''}`;
        return { received, verdict: 'refused', detail };
      },
    );
    if (isProven(proof)) return proof;
    const mend = `nothing more is tried: switch it off by hand, and mend "${name}"${choosesChannel ? ' or "channels"' : ''}`;
    return { ...proof, detail: `${proof.detail}; ${mend}` };
  }

  /** Asks, and where no answer comes, asks whether the question was refused; where nothing is known of that, once more. */
  async #unlessRefused(
    question: () => Promise<string>,
    understood: (reply: string) => Answer,
  ): Promise<Answer> {
    const reply = await question().catch(async (error: unknown) => {
      if (!isWithoutAnswer(error)) throw error;
      return (await this.#errors.complaint()) ?? question();
    });
    return typeof reply === 'string' ? understood(reply) : reply;
  }

  #understood(reply: string, name: string, reading: DriverReading): Answer {
    const heard = (is: Extract<Exchange, { kind: 'reading' }>['heard']): readonly Exchange[] => [
      {
        ...{ kind: 'reading', reading: name, sends: reading.ask.map(({ text }) => text) },
        ...this.#channel,
        ...(is === undefined ? {} : { heard: is }),
      },
    ];
    const received = visible(reply);
    try {
      const is = meaningOf(reply, reading, this.#about(questionOf(reading), this.#part(name)));
      return {
        received,
        verdict: 'understood',
        detail: meaningText(is),
        exchanges: heard({ answer: reply, is }),
      };
    } catch (error) {
      if (!(error instanceof ReplyNotUnderstoodError)) throw error;
      this.#talk.dialogue.doubt();
      const exchanges = heard({ answer: reply, is: { kind: 'not-understood' } });
      return { received, verdict: 'unclear', exchanges, detail: expectedOf(error) };
    }
  }

  #part(name: string): DriverPart {
    return { driver: this.#talk.driver.name, section: 'readings', name };
  }

  #about(question: string, part: DriverPart): About {
    return { address: this.#talk.dialogue.address, question, part };
  }
}

function questionOf(reading: DriverReading): string {
  return reading.ask.at(-1)?.text ?? '';
}
