import { closeSync, readSync } from 'node:fs';
import { openRegular } from './read-whole.js';
import { NoRecordError } from './record-error.js';

/** No event is longer, in bytes without the end of its line. */
export const longestLine = 1 << 20;
/** How many bytes are asked for at once. Whoever makes texts of all of them keeps those from being collected. */
const atOnce = 1 << 18;
export const lineEnd = 0x0a;

/** Whole lines, each with its end; or, of the last line of a file, what is there without an end. */
export type Block =
  { readonly kind: 'lines'; readonly bytes: Buffer } | { readonly kind: 'rest'; readonly bytes: Buffer };

/**
 * Hands over a file's lines, as many at once as a quarter of a megabyte holds, up to `upTo` bytes. The bytes are good until `visit` is back:
 * the next ones take their place, so that memory does not grow with the file. A line that is far too long ends the
 * reading, as rest.
 * @throws NoRecordError when it can't be read.
 */
export function eachBlock(path: string, upTo: number, visit: (block: Block) => 'go on' | 'stop'): void {
  const file = opened(path);
  try {
    const room = Buffer.allocUnsafe(longestLine + atOnce);
    let kept = 0;
    let left = upTo;
    while (left > 0 && kept <= longestLine) {
      const count = readInto(room.subarray(kept, kept + Math.min(atOnce, left)), file, path);
      if (count === 0) break;
      left -= count;
      const read = room.subarray(0, kept + count);
      const whole = read.lastIndexOf(lineEnd) + 1;
      if (whole > 0 && visit({ kind: 'lines', bytes: read.subarray(0, whole) }) === 'stop') return;
      kept = read.copy(room, 0, whole);
    }
    if (kept > 0) visit({ kind: 'rest', bytes: room.subarray(0, kept) });
  } finally {
    closeSync(file);
  }
}

function opened(path: string): number {
  try {
    return openRegular(path);
  } catch (cause) {
    throw new NoRecordError(path, cause);
  }
}

function readInto(room: Buffer, file: number, path: string): number {
  try {
    return readSync(file, room);
  } catch (cause) {
    throw new NoRecordError(path, cause);
  }
}
