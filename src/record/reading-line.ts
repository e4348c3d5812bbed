import { lineEnd } from './journal-blocks.js';
import type { ReadingTaken, TimedEvent } from './journal-event.js';
import { ReadingSources } from './reading-source.js';

type TimedReading = TimedEvent & ReadingTaken;

const bytesOf = (text: string): Uint8Array => Uint8Array.from(Buffer.from(text, 'latin1'));
const beforeTime = bytesOf('{"t":');
const beforeStep = bytesOf(',"event":"reading","step":');
const beforePoint = bytesOf(',"point":');
const beforeSample = bytesOf(',"sample":');
const minus = 0x2d;
const dot = 0x2e;
const zero = 0x30;
const closingBrace = 0x7d;

/** The powers of ten that a double holds exactly. */
const tens: readonly number[] = Array.from({ length: 23 }, (_, power) => Number(`1e${power}`));

/**
 * Reads the plainest and by far most frequent line of a journal, a reading with a value as the writer puts it, from
 * the bytes as they stand: half the time of reading a long record went into parsing these as JSON. What it gives is
 * what `parseLine` gives; of a line that differs from that form in any way it gives nothing, and `parseLine` is to
 * decide.
 */
export class ReadingLines {
  readonly #sources = new ReadingSources();
  /** The number that was read last. */
  #number = 0;
  #end = 0;

  /** Where the line ended that was read last, its end included. */
  get end(): number {
    return this.#end;
  }

  /** The reading whose line begins there, with its end; undefined where that is not in the plain form. */
  read(bytes: Uint8Array, start: number): TimedReading | undefined {
    let at = this.#passNumber(bytes, passed(bytes, start, beforeTime));
    const t = this.#number;
    at = this.#passCount(bytes, passed(bytes, at, beforeStep));
    const step = this.#number;
    at = this.#passCount(bytes, passed(bytes, at, beforePoint));
    const point = this.#number;
    at = this.#passCount(bytes, passed(bytes, at, beforeSample));
    const sample = this.#number;
    const source = at === nowhere ? undefined : this.#sources.at(bytes, at);
    if (source === undefined) return undefined;
    at = this.#passNumber(bytes, this.#sources.end);
    const value = this.#number;
    if (at === nowhere || bytes[at] !== closingBrace || bytes[at + 1] !== lineEnd) return undefined;
    this.#end = at + 2;
    const { of, what, at: place } = source;
    // Two literals, and no spread: each is of one hidden class from the start.
    return place === undefined
      ? { t, event: 'reading', step, point, sample, of, what, value }
      : { t, event: 'reading', step, point, sample, of, what, at: place, value };
  }

  /** A whole number from 1 on; where it ends. */
  #passCount(bytes: Uint8Array, start: number): number {
    let count = 0;
    let at = start;
    for (; isDigit(bytes[at]); at += 1) count = count * 10 + digit(bytes[at]);
    this.#number = count;
    return bytes[start] !== zero && at > start && count <= Number.MAX_SAFE_INTEGER ? at : nowhere;
  }

  /**
   * A number without an exponent; where it ends. Its digits are a whole number that a double holds exactly, as is the
   * power of ten it is divided by, so the one division is rounded as reading it is (Clinger, "How to read floating
   * point numbers accurately", 1990). One with more digits than that is not read here.
   */
  #passNumber(bytes: Uint8Array, start: number): number {
    if (start === nowhere) return nowhere;
    const first = bytes[start] === minus ? start + 1 : start;
    let digits = 0;
    let at = first;
    for (; isDigit(bytes[at]); at += 1) digits = digits * 10 + digit(bytes[at]);
    if (at === first || (bytes[first] === zero && at > first + 1)) return nowhere;
    let decimals = 0;
    if (bytes[at] === dot) {
      const point = at;
      for (at += 1; isDigit(bytes[at]); at += 1) digits = digits * 10 + digit(bytes[at]);
      decimals = at - point - 1;
      if (decimals === 0) return nowhere;
    }
    if (digits > Number.MAX_SAFE_INTEGER || decimals >= tens.length) return nowhere;
    const size = digits / (tens[decimals] ?? 1);
    this.#number = first === start ? size : -size;
    return at;
  }
}

/** What comes is something else; nothing is read there. */
const nowhere = -1;

/** Behind that text, where it stands there. */
function passed(bytes: Uint8Array, at: number, text: Uint8Array): number {
  if (at === nowhere) return nowhere;
  for (let index = 0; index < text.length; index += 1) {
    if (bytes[at + index] !== text[index]) return nowhere;
  }
  return at + text.length;
}

function digit(byte = zero): number {
  return byte - zero;
}

function isDigit(byte = 0): boolean {
  return byte >= zero && byte <= 0x39;
}
