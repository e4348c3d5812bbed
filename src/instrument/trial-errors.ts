import type { Exchange } from '../files/driver-dialogue.js';
import type { Driver } from '../files/driver.js';
import { fateOf, readErrors, type ReportedError } from './error-report.js';
import type { Talk } from './tell.js';
import { type Answer, atLast, type TrialLine } from './trial-line.js';
import { isUnheard } from './gap.js';
import type { TrialResult } from './trial-result.js';
import { visible } from './visible.js';

type Asked = Exclude<Driver['errors'], 'none'>;

/** What an instrument on trial complains of, and of what. */
export class TrialErrors {
  readonly #line: TrialLine;
  readonly #talk: Talk;
  /** How much had gone over the line when there was no error left. */
  #clearAt = -1;

  constructor(line: TrialLine, talk: Talk) {
    this.#line = line;
    this.#talk = talk;
  }

  /** Those from before anything was told. */
  before({ ask: question }: Asked): Promise<TrialResult> {
    return this.#line.result(
      { part: 'error-queue', name: 'errors', sent: question },
      this.#talk,
      async () => {
        const { entries, clear } = await this.#read();
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
      },
    );
  }

  /** Takes out what is there since something was said, so that nothing said later is blamed for it. */
  async forget(): Promise<void> {
    if (this.#talk.driver.errors === 'none' || this.#line.mark === this.#clearAt) return;
    // Where it cannot be asked, whoever tells it something next finds that out.
    await this.#read().catch((error: unknown) => {
      if (!isUnheard(error)) throw error;
    });
  }

  /** What came of the message that was told last. */
  async ofWhatWasTold(): Promise<Answer> {
    if (this.#talk.driver.errors === 'none') {
      return { received: undefined, verdict: 'unclear', detail: 'sent; no error queue to ask about it' };
    }
    const complaint = await this.complaint();
    return complaint ?? { received: undefined, verdict: 'understood', detail: '' };
  }

  /** What it complains of since there was no error; undefined where it does not, or cannot be asked. */
  async complaint(): Promise<Answer | undefined> {
    const { entries } = await this.#read();
    if (entries.length === 0) return undefined;
    const exchanges = entries.map((entry) => this.#reported(entry));
    const isHarmless = exchanges.every((each) => each.kind === 'errors' && each.is === 'harmless');
    return {
      ...{ received: listed(entries), exchanges },
      ...(isHarmless
        ? { verdict: 'understood', detail: 'what its driver calls harmless' }
        : { verdict: 'refused', detail: 'in its error queue' }),
    };
  }

  async #read(): ReturnType<typeof readErrors> {
    const { dialogue, driver } = this.#talk;
    const errors = await atLast(() => readErrors(dialogue, driver));
    this.#clearAt = this.#line.mark;
    return errors;
  }

  #reported(entry: ReportedError): Exchange {
    const { errors } = this.#talk.driver;
    return { kind: 'errors', answer: entry.said, is: errors === 'none' ? 'error' : fateOf(entry, errors) };
  }
}

function listed(entries: readonly ReportedError[]): string {
  return entries.map(({ number, text }) => `${number} "${visible(text)}"`).join(', ');
}
