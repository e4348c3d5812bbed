/**
 * The errors this instrument makes, with their texts as SCPI-99 prints them (volume 2, chapter 21; numbers and
 * texts as public manuals state them, fixtures/reference/scpi-488.json; those marked are from memory).
 */
export const errorTexts = {
  '0': 'No error',
  '-101': 'Invalid character', // from memory
  '-102': 'Syntax error',
  '-103': 'Invalid separator',
  '-104': 'Data type error',
  '-108': 'Parameter not allowed',
  '-109': 'Missing parameter',
  '-111': 'Header separator error',
  '-112': 'Program mnemonic too long',
  '-113': 'Undefined header',
  '-114': 'Header suffix out of range',
  '-120': 'Numeric data error',
  '-121': 'Invalid character in number',
  '-123': 'Exponent too large',
  '-124': 'Too many digits',
  '-131': 'Invalid suffix',
  '-134': 'Suffix too long',
  '-138': 'Suffix not allowed',
  '-144': 'Character data too long',
  '-151': 'Invalid string data', // from memory
  '-171': 'Invalid expression', // from memory
  '-213': 'Init ignored', // from memory
  '-221': 'Settings conflict', // from memory
  '-222': 'Data out of range',
  '-224': 'Illegal parameter value',
  '-230': 'Data corrupt or stale', // from memory
  '-350': 'Queue overflow',
  '-410': 'Query INTERRUPTED', // from memory
  '-420': 'Query UNTERMINATED', // from memory
  '-440': 'Query UNTERMINATED after indefinite response', // from memory
} as const satisfies Readonly<Record<string, string>>;

export type ErrorNumber = {
  [Text in keyof typeof errorTexts]: Text extends `${infer Value extends number}` ? Value : never;
}[keyof typeof errorTexts];

/** What stops a message: it cannot be read, or not be done. */
export class StandardError extends Error {
  readonly number: ErrorNumber;

  constructor(number: ErrorNumber) {
    super(errorTexts[`${number}`]);
    this.number = number;
  }
}

/** Error numbers come in hundreds, each with its bit in the standard event status register (SCPI-99, 21.8). */
const bitOfHundred: Readonly<Record<number, number>> = { 1: 32, 2: 16, 3: 8, 4: 4 };

/** The bit of the standard event status register that an error sets: 32, 16, 8 or 4. */
export function eventBitOf(number: ErrorNumber): number {
  return bitOfHundred[Math.floor(-number / 100)] ?? 0;
}

/** A command error ends the message in which it stands: what follows cannot be told apart for sure. */
export function isCommandError(number: ErrorNumber): boolean {
  return eventBitOf(number) === 32;
}

/** First in, first out; when it is full its last entry becomes -350, and what comes after is lost. */
export class ErrorQueue {
  readonly #length: number;
  #entries: ErrorNumber[] = [];

  constructor(length: number) {
    this.#length = length;
  }

  get isEmpty(): boolean {
    return this.#entries.length === 0;
  }

  get count(): number {
    return this.#entries.length;
  }

  push(number: ErrorNumber): void {
    if (this.#entries.length < this.#length) this.#entries.push(number);
    else this.#entries[this.#length - 1] = -350;
  }

  /** Takes the oldest; 0 when there is none. */
  next(): ErrorNumber {
    return this.#entries.shift() ?? 0;
  }

  clear(): void {
    this.#entries = [];
  }
}
