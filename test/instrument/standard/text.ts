import { StandardError } from './errors.js';

/** A message as it is read, from left to right. */
export class Text {
  readonly #whole: string;
  #at = 0;

  constructor(whole: string) {
    this.#whole = whole;
  }

  isAtEnd(): boolean {
    return this.#at >= this.#whole.length;
  }

  next(): string {
    return this.#whole.charAt(this.#at);
  }

  isAt(one: RegExp): boolean {
    return one.test(this.next());
  }

  /** What the pattern finds right here; empty when it finds nothing. */
  take(pattern: RegExp): string {
    const here = new RegExp(pattern.source, 'y');
    here.lastIndex = this.#at;
    const found = here.exec(this.#whole)?.[0] ?? '';
    this.#at += found.length;
    return found;
  }

  takeIf(character: string): boolean {
    const is = this.next() === character;
    if (is) this.#at += 1;
    return is;
  }

  takeRest(): string {
    const rest = this.#whole.slice(this.#at);
    this.#at = this.#whole.length;
    return rest;
  }

  expect(character: string): void {
    if (!this.takeIf(character)) throw new StandardError(-103);
  }

  /** Whether there was any: white space is every control character, and the space (IEEE 488.2, 7.4.1.2). */
  skipWhite(): boolean {
    const from = this.#at;
    while (!this.isAtEnd() && this.next() <= ' ') this.#at += 1;
    return this.#at > from;
  }
}
