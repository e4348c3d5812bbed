import { type Command, event } from './command.js';
import { commonCommands } from './common-commands.js';
import { type ErrorNumber, ErrorQueue, eventBitOf, isCommandError, StandardError } from './errors.js';
import { numbersIn } from './header.js';
import { fromRoot } from './header-path.js';
import { programMessage, type Unit } from './program-message.js';
import { type ReplyForm, strict, written } from './response.js';
import { operationComplete, Status } from './status.js';

export interface InstrumentParts {
  readonly identity: string;
  /** Beside what IEEE 488.2 and SCPI-99 ask of every instrument. */
  readonly commands: readonly Command[];
  /** What *RST does. */
  readonly reset?: () => void;
  readonly form?: ReplyForm;
  /** How many errors it remembers. */
  readonly queue?: number;
}

/** A whole response message, and when it begins to come. */
export interface ResponseMessage {
  readonly text: string;
  readonly at: number;
}

/**
 * An instrument made from IEEE 488.2 and SCPI-99 and from nothing else: message exchange, status and common
 * commands, with a command tree of its own. It knows nothing of lines: a message is written to it and its response
 * is read, each at a time that the caller gives. All that it was told goes on `heard`.
 *
 * Where the standards leave a choice it is the strict one: no empty unit between semicolons, no multiplier without
 * its unit, and what follows a command error in the same message is let go.
 */
export class StandardInstrument {
  readonly heard: string[] = [];
  readonly errors: ErrorQueue;
  readonly status = new Status();
  readonly form: ReplyForm;
  readonly #commands: readonly Command[];
  #response: ResponseMessage | undefined;
  /** When what it is doing meanwhile is done. */
  #busyUntil = 0;
  /** When the operation complete bit is due. */
  #completeAt: number | undefined;
  /** The responses of the message that it is at. */
  #made: string[] = [];

  constructor({ identity, commands, reset, form = strict, queue = 10 }: InstrumentParts) {
    this.form = form;
    this.errors = new ErrorQueue(queue);
    const common = commonCommands({
      identity,
      status: this.status,
      errors: this.errors,
      hasOutput: () => this.#made.length > 0,
      completeLater: () => {
        this.#completeAt = this.#busyUntil;
      },
      busyUntil: () => this.#busyUntil,
    });
    this.#commands = [
      ...common,
      event('*RST', () => {
        reset?.();
        return undefined;
      }),
      ...commands,
    ];
  }

  /** A program message without its end. A response that nobody has read is lost by it, and is a query error. */
  write(message: string, at = 0): void {
    this.heard.push(message);
    if (this.#response !== undefined) {
      this.#response = undefined;
      this.#complain(-410);
    }
    let now = at;
    let path: readonly string[] = [];
    let endless = false;
    this.#made = [];
    try {
      for (const unit of programMessage(message)) {
        const full = fromRoot(unit, path);
        ({ path } = full);
        if (unit.isQuery && endless) {
          this.#complain(-440);
          continue;
        }
        const done = this.#perform(unit, full.words, now);
        now = done.at;
        endless ||= done.endless;
      }
    } catch (error) {
      if (!(error instanceof StandardError)) throw error;
      this.#complain(error.number);
    }
    if (this.#made.length > 0) this.#response = { text: this.#made.join(';'), at: now };
    this.#made = [];
  }

  /** The response; to ask for one where there is none is a query error. */
  read(): ResponseMessage | undefined {
    const response = this.#response;
    this.#response = undefined;
    if (response === undefined) this.#complain(-420);
    return response;
  }

  /** The response, if there is one: what a line without an end message does, which sends whatever there is. */
  readIfAny(): ResponseMessage | undefined {
    return this.#response === undefined ? undefined : this.read();
  }

  /** @throws StandardError that ends the message */
  #perform(
    unit: Unit,
    words: readonly string[],
    at: number,
  ): { readonly at: number; readonly endless: boolean } {
    if (this.#completeAt !== undefined && this.#completeAt <= at) {
      this.status.standard.happened(operationComplete);
      this.#completeAt = undefined;
    }
    try {
      for (const { header, tell, ask } of this.#commands) {
        const numbers = numbersIn(header, words);
        if (numbers === undefined) continue;
        const occasion = { at, numbers };
        if (unit.isQuery && ask !== undefined) {
          const { response, takes = 0 } = ask(unit.data, occasion);
          this.#made.push(written(response, this.form));
          return { at: at + takes, endless: response.kind === 'arbitrary' };
        }
        if (!unit.isQuery && tell !== undefined) {
          const { goesOn = 0, waits = 0 } = tell(unit.data, occasion);
          this.#busyUntil = Math.max(this.#busyUntil, at + goesOn);
          return { at: at + waits, endless: false };
        }
      }
      throw new StandardError(-113);
    } catch (error) {
      if (!(error instanceof StandardError) || isCommandError(error.number)) throw error;
      this.#complain(error.number);
      return { at, endless: false };
    }
  }

  #complain(number: ErrorNumber): void {
    this.errors.push(number);
    this.status.standard.happened(eventBitOf(number));
  }
}
