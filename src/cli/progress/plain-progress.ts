import { printable } from '../../quantity/printable.js';
import { spokenTime } from '../../quantity/spoken-time.js';
import { fitted } from '../../quantity/word-wrap.js';
import type { JournalEvent } from '../../record/journal-event.js';
import { pointsInWords, type RunSoFar } from './run-so-far.js';
import type { RunProgress } from './run-progress.js';

/** A line when a step begins and one when it is done, each of which makes sense alone in a log. */
export class PlainProgress implements RunProgress {
  readonly #stream: NodeJS.WriteStream;
  readonly #run: RunSoFar;

  constructor(stream: NodeJS.WriteStream, run: RunSoFar) {
    this.#stream = stream;
    this.#run = run;
  }

  stepBegan(step: number, kind: string, summary: string): void {
    this.#say(`${this.#place(step)}: ${kind}, ${printable(summary)}`);
  }

  progress(): void {
    // A log has no use for the moment.
  }

  recorded(event: JournalEvent): void {
    if (event.event !== 'step-ended') return;
    const { state, took = 0, points } = this.#run.steps[event.step - 1] ?? {};
    if (state !== 'done') return;
    const came = points === undefined ? '' : pointsInWords(points);
    this.#say(`${this.#place(event.step)} done in ${spokenTime(took)}${came === '' ? '' : `: ${came}`}`);
  }

  noticed(text: string): void {
    this.#say(printable(text), '  ');
  }

  end(): void {
    // Every line is whole.
  }

  #place(step: number): string {
    return `step ${step} of ${this.#run.steps.length}`;
  }

  #say(text: string, indent = ''): void {
    this.#stream.write(`${fitted(text, this.#stream.columns, { indent })}\n`);
  }
}
