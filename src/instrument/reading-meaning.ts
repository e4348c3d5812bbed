import type { DriverReading } from '../files/driver.js';
import type { ReadingMeaning } from '../files/driver-dialogue.js';
import { meaningText } from '../files/driver-dialogue-text.js';
import { readChannel, readFlag, readNumber, type About } from './reading.js';

/**
 * What a reply to a reading is taken for.
 * @throws ReplyNotUnderstoodError
 */
export function meaningOf(reply: string, reading: DriverReading, about: About): ReadingMeaning {
  switch (reading.kind) {
    case 'flag':
      return { kind: 'flag', value: readFlag(reply, reading, about) };
    case 'channel':
      return { kind: 'channel', value: readChannel(reply, reading, about) };
    case 'number': {
      const measured = readNumber(reply, reading, about);
      return measured.kind === 'value'
        ? { kind: 'number', value: measured.value, dimension: reading.dimension }
        : measured;
    }
  }
}

/** Of what a file says and what is worked out the last binary digits may differ. */
const rounding = 1e-12;

/** Whether two meanings are the same, numbers to rounding. */
export function isSameMeaning(one: ReadingMeaning, other: ReadingMeaning): boolean {
  if (one.kind !== 'number' || other.kind !== 'number') return meaningText(one) === meaningText(other);
  const size = Math.max(Math.abs(one.value), Math.abs(other.value));
  return Math.abs(one.value - other.value) <= rounding * size;
}
