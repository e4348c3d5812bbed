import { eachBlock, lineEnd } from './journal-blocks.js';
import type { Integrity } from './journal-check.js';
import type { TimedEvent } from './journal-event.js';
import { parseLine } from './journal-line.js';
import { ReadingLines } from './reading-line.js';

/**
 * Hands over the events of a journal in order, as far as `integrity` believes it.
 * A line that is no event ends the reading; the integrity that comes back says so.
 */
export function readJournal(
  path: string,
  integrity: Integrity,
  visit: (event: TimedEvent) => void,
): Integrity {
  const readings = new ReadingLines();
  let lines = 0;
  let bytes = 0;
  let result = integrity;
  eachBlock(path, integrity.bytes, (block) => {
    for (let start = 0; start < block.bytes.length;) {
      // No journal begins with a reading.
      const reading = lines === 0 ? undefined : readings.read(block.bytes, start);
      const end = reading === undefined ? endOfLine(block.bytes, start) : readings.end;
      const event = reading ?? parseLine(lineOf(block.bytes, start, end), lines === 0);
      if (event === undefined) {
        result = { kind: 'damaged', lines, bytes, line: lines + 1, problem: 'the line is no event' };
        return 'stop';
      }
      lines += 1;
      bytes += end - start;
      start = end;
      visit(event);
    }
    return 'go on';
  });
  return result;
}

/** Behind the line that begins there. */
function endOfLine(bytes: Buffer, start: number): number {
  return bytes.indexOf(lineEnd, start) + 1 || bytes.length;
}

/** Without its end. */
function lineOf(bytes: Buffer, start: number, end: number): string {
  return bytes.toString('utf8', start, bytes[end - 1] === lineEnd ? end - 1 : end);
}
