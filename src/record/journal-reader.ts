import { atOnce, eachBlock, lineEnd } from './journal-blocks.js';
import type { Integrity } from './journal-check.js';
import type { TimedEvent } from './journal-event.js';
import { parseLine } from './journal-line.js';

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
  eachBlock(path, { upTo: integrity.bytes, readAtOnce: atOnce.asText }, (block) => {
    const before = lines;
    for (const line of linesOf(block.bytes)) {
      const event = parseLine(line, lines === 0);
      if (event === undefined) {
        bytes += bytesOfLines(block.bytes, lines - before);
        result = { kind: 'damaged', lines, bytes, line: lines + 1, problem: 'the line is no event' };
        return 'stop';
      }
      lines += 1;
      visit(event);
    }
    bytes += block.bytes.length;
    return 'go on';
  });
  return result;
}

/** Decoded at once: the end of a line is part of no longer sequence in UTF-8. */
function linesOf(bytes: Buffer): readonly string[] {
  const lines = bytes.toString('utf8').split('\n');
  if (bytes.at(-1) === lineEnd) lines.pop();
  return lines;
}

/** How many bytes the first lines of a block take, with their ends. */
function bytesOfLines(bytes: Buffer, lines: number): number {
  let length = 0;
  for (let line = 0; line < lines; line += 1) length = bytes.indexOf(lineEnd, length) + 1;
  return length;
}
