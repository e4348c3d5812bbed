import { createInterface, type Interface } from 'node:readline';
import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import { fitted } from '../quantity/word-wrap.js';
import { printable, printableLines } from '../quantity/printable.js';
import { type Style, styleFor } from '../report/style.js';
import { errorText } from './error-text.js';
import type { Streams } from './streams.js';

/** Longer lines are hard to read, however wide the window. */
const widest = 80;

/** Whoever was asked went away, or wants no more of it. */
export class NothingWrittenError extends RailproofError {
  readonly code = 'NOTHING_WRITTEN';
  readonly exitCode = exitCodes.stopped;

  constructor(reason: string, options: { readonly cause?: unknown } = {}) {
    super(`${reason}; nothing was written`, { ...options, advice: 'begin again whenever you like' });
  }
}

/** An answer that will not do. */
export class UnfitAnswerError extends RailproofError {
  readonly code = 'UNFIT_ANSWER';
  readonly exitCode = exitCodes.usage;

  constructor(message: string, advice?: string) {
    super(message, advice === undefined ? {} : { advice });
  }
}

export interface Question<T> {
  readonly ask: string;
  /** Why it is asked, and what the answer does. */
  readonly why: string;
  /** What may be answered, numbered. */
  readonly listed?: readonly string[];
  /** What Enter alone stands for, in words too; an answer must be given where there is none. */
  readonly usual?: { readonly value: T; readonly words: string };
  /** @throws RailproofError where the answer will not do; it is then asked again, with that reason. */
  readonly read: (answer: string) => T | Promise<T>;
}

export interface Option<T> {
  readonly word: string;
  readonly means: string;
  readonly value: T;
}

/**
 * Questions on a terminal, one below the other and in plain lines, so that they can be read again above, in a
 * narrow window too, and whatever the terminal knows of cursors. Each says why it is asked.
 *
 * At Ctrl-C and at the end of the input every question, and `signal`, ends with {@link NothingWrittenError}.
 */
export class Questions {
  readonly #lines: Interface;
  readonly #output: Streams['stderr'];
  readonly #style: Style;
  readonly #left = new AbortController();
  #typed: string[] = [];
  #waiting: ((line: string) => void) | undefined;

  constructor({ stdin, stderr, environment }: Streams) {
    this.#output = stderr;
    this.#style = styleFor(stderr, environment);
    this.#lines = createInterface({ input: stdin, output: stderr, prompt: '> ', historySize: 0 });
    this.#lines.on('line', (line) => {
      if (this.#waiting === undefined) this.#typed.push(line);
      else this.#waiting(line);
    });
    this.#lines.on('SIGINT', () => {
      this.forget();
      this.#leave('stopped with Ctrl-C');
    });
    this.#lines.on('close', () => {
      this.#leave('the input ended');
    });
    // A terminal that is gone reports an error.
    this.#lines.on('error', () => {
      this.#leave('the terminal was closed');
    });
  }

  /** Aborted when whoever is asked goes away. */
  get signal(): AbortSignal {
    return this.#left.signal;
  }

  /** What was typed while nothing was asked was not meant for the next question. */
  forget(): void {
    this.#typed = [];
  }

  close(): void {
    this.#lines.close();
  }

  say(text: string, indent = ''): void {
    this.#output.write(`${this.#fitted(printableLines(text), indent)}\n`);
  }

  /** @throws NothingWrittenError */
  async ask<T>({ ask, why, listed = [], usual, read }: Question<T>): Promise<T> {
    this.#output.write(`\n${this.#style.strong(this.#fitted(printableLines(ask)))}\n`);
    this.say(why, '  ');
    for (const [index, line] of listed.entries()) {
      const number = String(index + 1).padStart(2);
      this.#output.write(`${this.#fitted(`${number}  ${printable(line)}`, '  ', hangOf(line))}\n`);
    }
    if (usual !== undefined) this.say(`Enter alone: ${usual.words}.`, '  ');
    for (;;) {
      const answer = await this.#line();
      if (answer === '' && usual !== undefined) return usual.value;
      try {
        if (answer === '')
          throw new UnfitAnswerError('an answer is needed here; Ctrl-C ends this, and writes nothing');
        return await read(answer);
      } catch (error) {
        if (!(error instanceof RailproofError)) throw error;
        this.say(errorText(error), '  ');
      }
    }
  }

  /** One of a few, by its number or its word. @throws NothingWrittenError */
  async choose<T>(
    { ask, why }: { readonly ask: string; readonly why: string },
    options: readonly Option<T>[],
    usual?: string,
  ): Promise<T> {
    const widestWord = Math.max(...options.map(({ word }) => word.length));
    const found = options.find(({ word }) => word === usual);
    return this.ask({
      ...{ ask, why: `${why} Answer with a number or a word.` },
      listed: options.map(({ word, means }) => `${word.padEnd(widestWord)}  ${means}`),
      ...(found === undefined ? {} : { usual: { value: found.value, words: found.word } }),
      read: (answer) => {
        const chosen =
          options.find(({ word }) => word.toLowerCase() === answer.toLowerCase()) ??
          (/^\d{1,3}$/.test(answer) ? options[Number(answer) - 1] : undefined);
        if (chosen !== undefined) return chosen.value;
        throw new UnfitAnswerError(
          `found "${answer}"; a number from 1 to ${options.length} is needed, or ${options.map(({ word }) => word).join(', ')}`,
        );
      },
    });
  }

  /** @throws NothingWrittenError */
  yes(question: { readonly ask: string; readonly why: string }, usual: boolean): Promise<boolean> {
    return this.ask({
      ask: `${question.ask} (yes or no)`,
      why: question.why,
      usual: { value: usual, words: usual ? 'yes' : 'no' },
      read: (answer) => {
        if (/^y(?:es)?$/i.test(answer)) return true;
        if (/^no?$/i.test(answer)) return false;
        throw new UnfitAnswerError(`found "${answer}"; yes or no is needed`);
      },
    });
  }

  /** What was pasted before the input ended is answered with first. */
  #line(): Promise<string> {
    const typed = this.#typed.shift();
    if (typed !== undefined) {
      this.#output.write(`> ${printable(typed)}\n`);
      return Promise.resolve(typed.trim());
    }
    this.signal.throwIfAborted();
    this.#lines.prompt();
    return new Promise((resolve, reject) => {
      const left = (): void => {
        reject(this.signal.reason as Error);
      };
      this.signal.addEventListener('abort', left, { once: true });
      this.#waiting = (line) => {
        this.#waiting = undefined;
        this.signal.removeEventListener('abort', left);
        resolve(line.trim());
      };
    });
  }

  #leave(reason: string): void {
    if (this.signal.aborted) return;
    this.#output.write('\n');
    this.#left.abort(new NothingWrittenError(reason));
    this.#lines.close();
  }

  #fitted(text: string, indent = '', hang = ''): string {
    const columns = this.#output.columns;
    const width = columns === 0 ? widest : Math.min(columns, widest);
    return fitted(text, width, { indent, hang });
  }
}

/** What goes on from a listed line begins below its meaning. */
function hangOf(line: string): string {
  return ' '.repeat(4 + (/^\S+ +/.exec(line)?.[0].length ?? 0));
}
