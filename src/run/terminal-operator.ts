import { createInterface } from 'node:readline/promises';
import type { Readable, Writable } from 'node:stream';
import { printableLines } from '../quantity/printable.js';
import { typedAs } from '../quantity/typed-as.js';
import type { Acknowledgement } from '../record/journal-event.js';
import type { Operator, OperatorRequest } from '../steps/operator.js';
import { TerminalClosed } from './stopped.js';
import { forgetTyped, givesKeys } from './typed-before.js';
import { fitted } from '../quantity/word-wrap.js';

/** Longer lines are hard to read, however wide the window. */
const widestText = 100;

/** Beyond the indentation, the width of `1. `. */
const numberedHang = '   ';

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
    const isWiring = caution === 'wiring';
    if (isWiring) this.#say(`\nWiring, with nothing switched on yet:\n${numbered(text)}\n`, numberedHang);
    else this.#say(`\nCaution, ${caution.replaceAll('-', ' ')}: ${text}\n`);
    if (this.#terminal.yes) {
      this.#say('Acknowledged by --yes.\n');
      return '--yes';
    }
    const asked = isWiring ? 'Is it wired so?' : 'Understood and taken care of?';
    const agreed = await this.typesYes(`${asked} Type yes; anything else ends the run: `, signal);
    return agreed ? 'operator' : 'refused';
  }

  async ask({ text, answer }: OperatorRequest, signal: AbortSignal): Promise<string> {
    this.#say(`\n${text}\n`);
    if (answer === 'done') return this.#untilDone(signal);
    const expected = answer === 'text' ? 'In your own words' : `In ${typedAs[answer]}`;
    return (await this.#question(`${expected}; Ctrl-C stops the run.\n> `, signal)).trim();
  }

  /** Whether the answer is yes; whatever else is typed is no. @throws the signal's reason when it is taken away. */
  async typesYes(question: string, signal: AbortSignal): Promise<boolean> {
    return /^y(es)?$/i.test((await this.#question(question, signal)).trim());
  }

  /** Only Enter, or a word that says so, means done: whoever types "wait" must not be taken at another word. */
  async #untilDone(signal: AbortSignal): Promise<'done'> {
    let question = 'Press Enter when it is done; Ctrl-C stops the run. ';
    while (!/^(done|y|yes)?$/i.test((await this.#question(question, signal)).trim())) {
      question = 'Not done, then. Press Enter when it is; Ctrl-C stops the run, with the load off. ';
    }
    return 'done';
  }

  #say(text: string, hang = ''): void {
    this.#terminal.output.write(this.#fitted(text, hang));
  }

  #fitted(text: string, hang = ''): string {
    return fitted(printableLines(text), this.#terminal.output.columns, { widest: widestText, hang });
  }

  /**
   * At the end of the input a question would never be answered, so that is taken as a wish to stop. A question that
   * its signal takes away leaves a whole line (readline ends it), and nothing of what was typed for the next one.
   */
  async #question(text: string, signal: AbortSignal): Promise<string> {
    const { input, output } = this.#terminal;
    if (givesKeys(input) && !signal.aborted) await forgetTyped(input, this.#terminal.interrupted);
    if (input.readableEnded || input.destroyed) throw new TerminalClosed();
    signal.throwIfAborted();
    const closed = new AbortController();
    // Before the question is seen: what is pressed as soon as it is must come as a key already.
    const lines = createInterface({ input, output });
    lines.once('close', () => {
      closed.abort(new TerminalClosed());
    });
    // A terminal that is gone reports an error, which must not end the program with the load on.
    lines.on('error', () => {
      closed.abort(new TerminalClosed());
    });
    lines.on('SIGINT', () => {
      this.#terminal.interrupted();
    });
    const above = this.#fitted(text).split('\n');
    const prompt = above.pop() ?? '';
    if (above.length > 0) output.write(`${above.join('\n')}\n`);
    try {
      return await lines.question(prompt, { signal: AbortSignal.any([signal, closed.signal]) });
    } catch (error) {
      if (signal.aborted) throw signal.reason;
      if (closed.signal.aborted) throw closed.signal.reason;
      throw error;
    } finally {
      lines.close();
    }
  }
}

/** A list where there is more than one thing to do. */
function numbered(text: string): string {
  const lines = text.split('\n');
  return lines
    .map((line, index) => (lines.length === 1 ? `  ${line}` : `  ${index + 1}. ${line}`))
    .join('\n');
}
