import { createInterface } from 'node:readline/promises';
import type { Readable, Writable } from 'node:stream';
import { printableLines } from '../quantity/printable.js';
import type { Acknowledgement } from '../record/journal-event.js';
import type { Operator, OperatorRequest } from '../steps/operator.js';
import { StoppedByOperator } from './stopped.js';
import { fitted } from '../quantity/word-wrap.js';

/** Longer lines are hard to read, however wide the window. */
const widestText = 100;

interface Terminal {
  readonly input: Readable & { readonly isTTY?: boolean };
  readonly output: Writable & { readonly columns?: number };
  /** Cautions are acknowledged beforehand. */
  readonly yes: boolean;
  /** Told of Ctrl-C at a question, which is a key there and no signal; it aborts the signal of the question. */
  readonly interrupted: () => void;
}

/** The person at the keyboard. Talk goes to stderr, so that stdout carries results only. */
export class TerminalOperator implements Operator {
  readonly present: boolean;
  readonly #terminal: Terminal;

  constructor(terminal: Terminal) {
    this.#terminal = terminal;
    this.present = terminal.input.isTTY === true;
  }

  async acknowledge(
    caution: string,
    text: string,
    signal: AbortSignal,
  ): Promise<Acknowledgement | 'refused'> {
    const heading = caution === 'wiring' ? 'Wiring:\n' : `Caution, ${caution.replaceAll('-', ' ')}: `;
    this.#say(`\n${heading}${text}\n`);
    if (this.#terminal.yes) {
      this.#say('Acknowledged by --yes.\n');
      return '--yes';
    }
    const answer = await this.#question('Understood and taken care of? Type yes: ', signal);
    return /^y(es)?$/i.test(answer.trim()) ? 'operator' : 'refused';
  }

  async ask({ text, answer }: OperatorRequest, signal: AbortSignal): Promise<string> {
    if (answer === 'done') return this.#untilDone(text, signal);
    return (await this.#question(`\n${text}\n> `, signal)).trim();
  }

  /** Only Enter, or a word that says so, means done: whoever types "wait" must not be taken at another word. */
  async #untilDone(text: string, signal: AbortSignal): Promise<'done'> {
    let question = `\n${text}\nPress Enter when it is done. `;
    while (!/^(done|y|yes)?$/i.test((await this.#question(question, signal)).trim())) {
      question = 'Not done, then. Press Enter when it is; Ctrl-C stops and leaves the load off. ';
    }
    return 'done';
  }

  #say(text: string): void {
    this.#terminal.output.write(this.#fitted(text));
  }

  #fitted(text: string): string {
    return fitted(printableLines(text), this.#terminal.output.columns, { widest: widestText });
  }

  /** At the end of the input a question would never be answered, so that is taken as a wish to stop. */
  async #question(text: string, signal: AbortSignal): Promise<string> {
    const { input, output } = this.#terminal;
    if (input.readableEnded || input.destroyed) throw closedAtQuestion();
    const closed = new AbortController();
    const lines = createInterface({ input, output });
    lines.once('close', () => {
      closed.abort(closedAtQuestion());
    });
    // A terminal that is gone reports an error, which must not end the program with the load on.
    lines.on('error', () => {
      closed.abort(closedAtQuestion());
    });
    lines.on('SIGINT', () => {
      this.#terminal.interrupted();
    });
    try {
      return await lines.question(this.#fitted(text), { signal: AbortSignal.any([signal, closed.signal]) });
    } catch (error) {
      if (signal.aborted) throw signal.reason;
      if (closed.signal.aborted) throw closed.signal.reason;
      throw error;
    } finally {
      lines.close();
    }
  }
}

function closedAtQuestion(): StoppedByOperator {
  return new StoppedByOperator('the terminal was closed at a question');
}
