import { type Block, eachBlock, lineEnd, longestLine } from './journal-blocks.js';
import { isSealed, newSealer, sealHolds } from './seal.js';

/** How much of a journal can be believed. */
export type Integrity =
  | { readonly kind: 'whole'; readonly lines: number; readonly bytes: number }
  /** It ends without its last event; everything up to the last whole line is there. */
  | { readonly kind: 'cut-off'; readonly lines: number; readonly bytes: number; readonly tornBytes: number }
  /**
   * A seal does not hold, and it is believed up to the last one that does; or a line is no event, and it is believed
   * up to there, though in one that was cut off nothing seals the last lines.
   */
  | {
      readonly kind: 'damaged';
      readonly lines: number;
      readonly bytes: number;
      readonly line: number;
      readonly problem: string;
    };

/** The problem of a journal whose first line names another run.json than the one beside it. */
export const otherHeader = 'it does not begin with the run.json that is here now';

/**
 * Checks every seal of a journal, in one pass over its bytes and in bounded memory.
 * @throws NoRecordError when it can't be read.
 */
export function checkJournal(path: string): Integrity {
  const check = new JournalCheck();
  eachBlock(path, Number.POSITIVE_INFINITY, (block) => check.add(block));
  return check.result();
}

const openingBrace = 0x7b;
const closingBrace = 0x7d;

class JournalCheck {
  readonly #hash = newSealer();
  #lines = 0;
  #bytes = 0;
  /** Up to the last seal that holds. */
  #believed = { lines: 0, bytes: 0 };
  #ended = false;
  #tornBytes = 0;
  #problem: string | undefined;

  add({ kind, bytes }: Block): 'go on' | 'stop' {
    if (kind === 'lines') this.#addLines(bytes);
    else {
      this.#problem = this.#problemOfPlace(bytes.length);
      if (this.#problem === undefined) this.#tornBytes = bytes.length;
    }
    return this.#problem === undefined ? 'go on' : 'stop';
  }

  result(): Integrity {
    const seen = { lines: this.#lines, bytes: this.#bytes };
    if (this.#problem !== undefined) {
      return { kind: 'damaged', ...this.#believed, line: this.#lines + 1, problem: this.#problem };
    }
    return this.#ended
      ? { kind: 'whole', ...seen }
      : { kind: 'cut-off', ...seen, tornBytes: this.#tornBytes };
  }

  /** The hash takes all lines up to a seal at once. */
  #addLines(bytes: Buffer): void {
    let hashed = 0;
    for (let start = 0; start < bytes.length;) {
      const end = bytes.indexOf(lineEnd, start);
      const sealed = isSealed(bytes, start, end);
      if (sealed) {
        this.#hash.update(bytes.subarray(hashed, start));
        hashed = start;
      }
      this.#problem =
        this.#problemOfPlace(end - start) ??
        (sealed ? this.#problemOfSeal(bytes.subarray(start, end)) : problemOfText(bytes, start, end));
      if (this.#problem !== undefined) return;
      this.#lines += 1;
      this.#bytes += end + 1 - start;
      if (sealed) {
        this.#believed = { lines: this.#lines, bytes: this.#bytes };
        this.#ended = bytes.subarray(start, end).includes('"event":"ended"');
      }
      start = end + 1;
    }
    this.#hash.update(bytes.subarray(hashed));
  }

  #problemOfPlace(length: number): string | undefined {
    if (this.#ended) return 'there is more after the end';
    return length > longestLine ? 'the line is too long for an event' : undefined;
  }

  #problemOfSeal(line: Buffer): string | undefined {
    return sealHolds(this.#hash, line) ? undefined : 'the seal does not agree with the lines before it';
  }
}

function problemOfText(bytes: Buffer, start: number, end: number): string | undefined {
  const isObject = bytes[start] === openingBrace && bytes[end - 1] === closingBrace;
  return isObject ? undefined : 'the line is no event';
}
