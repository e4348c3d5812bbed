import { closeSync, readSync } from 'node:fs';
import type { TimedEvent } from './journal-event.js';
import { parseLine } from './journal-line.js';
import { openRegular } from './read-whole.js';
import { NoRecordError } from './record-error.js';
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

const chunkSize = 1 << 18;
const longestLine = 1 << 20;

/**
 * Checks every seal of a journal, in one pass over its bytes and in bounded memory.
 * @throws NoRecordError when it can't be read.
 */
export function checkJournal(path: string): Integrity {
  const check = new JournalCheck();
  eachLine(path, Number.POSITIVE_INFINITY, (line, whole) => check.add(line, whole));
  return check.result();
}

class JournalCheck {
  readonly #hash = newSealer();
  #lines = 0;
  #bytes = 0;
  /** Up to the last seal that holds. */
  #believed = { lines: 0, bytes: 0 };
  #ended = false;
  #tornBytes = 0;
  #problem: string | undefined;

  add(line: Buffer, whole: boolean): 'go on' | 'stop' {
    this.#problem = this.#problemWith(line, whole);
    if (this.#problem !== undefined) return 'stop';
    if (!whole) {
      this.#tornBytes = line.length;
      return 'stop';
    }
    this.#hash.update(line).update('\n');
    this.#lines += 1;
    this.#bytes += line.length + 1;
    if (isSealed(line)) {
      this.#believed = { lines: this.#lines, bytes: this.#bytes };
      this.#ended = line.includes('"event":"ended"');
    }
    return 'go on';
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

  #problemWith(line: Buffer, whole: boolean): string | undefined {
    if (this.#ended) return 'there is more after the end';
    if (line.length > longestLine) return 'the line is too long for an event';
    if (!whole) return undefined;
    if (isSealed(line)) {
      return sealHolds(this.#hash, line) ? undefined : 'the seal does not agree with the lines before it';
    }
    const isObject = line[0] === 0x7b && line.at(-1) === 0x7d;
    return isObject ? undefined : 'the line is no event';
  }
}

/**
 * Hands over the events of a journal in order, as far as `integrity` believes it.
 * A line that is no event ends the reading; the integrity that comes back says so.
 */
export function readJournal(
  path: string,
  integrity: Integrity,
  visit: (event: TimedEvent) => void,
): Integrity {
  let lines = 0;
  let bytes = 0;
  let result = integrity;
  eachLine(path, integrity.bytes, (line) => {
    const event = parseLine(line, lines === 0);
    if (event === undefined) {
      result = { kind: 'damaged', lines, bytes, line: lines + 1, problem: 'the line is no event' };
      return 'stop';
    }
    lines += 1;
    bytes += line.length + 1;
    visit(event);
    return 'go on';
  });
  return result;
}

/** Calls back for each line without its end; `whole` is false for a last line that has none. */
function eachLine(
  path: string,
  upTo: number,
  visit: (line: Buffer, whole: boolean) => 'go on' | 'stop',
): void {
  let file: number;
  try {
    file = openRegular(path);
  } catch (cause) {
    throw new NoRecordError(path, cause);
  }
  try {
    const chunk = Buffer.allocUnsafe(chunkSize);
    let kept: Buffer = Buffer.alloc(0);
    let left = upTo;
    while (left > 0) {
      const count = readInto(chunk, file, Math.min(chunkSize, left), path);
      if (count === 0) break;
      left -= count;
      const data =
        kept.length === 0 ? chunk.subarray(0, count) : Buffer.concat([kept, chunk.subarray(0, count)]);
      let start = 0;
      for (let end = data.indexOf(0x0a, kept.length); end !== -1; end = data.indexOf(0x0a, start)) {
        if (visit(data.subarray(start, end), true) === 'stop') return;
        start = end + 1;
      }
      kept = Buffer.from(data.subarray(start));
      if (kept.length > longestLine) break;
    }
    if (kept.length > 0) visit(kept, false);
  } finally {
    closeSync(file);
  }
}

function readInto(chunk: Buffer, file: number, most: number, path: string): number {
  try {
    return readSync(file, chunk, 0, most, null);
  } catch (cause) {
    throw new NoRecordError(path, cause);
  }
}
