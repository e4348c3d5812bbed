import type { About } from './reading.js';
import { ReplyNotUnderstoodError } from './reply-errors.js';
import { parseScpiNumber } from './scpi-number.js';

const mostBits = 2 ** 16;

/**
 * The number of a status byte or of an event register (IEEE 488.2, NR1: 0 to 255; some of SCPI's have 16 bits).
 * @throws ReplyNotUnderstoodError
 */
export function readBits(reply: string, about: About): number {
  const read = parseScpiNumber(reply, about);
  if (read.kind === 'value' && Number.isInteger(read.value) && read.value >= 0 && read.value < mostBits) {
    return read.value;
  }
  throw new ReplyNotUnderstoodError({ ...about, reply, expected: 'the number of a register' });
}
