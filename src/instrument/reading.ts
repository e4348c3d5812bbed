import type { DriverReading } from '../files/driver.js';
import { ReplyNotUnderstoodError } from './reply-errors.js';
import { parseScpiNumber, type Measurement } from './scpi-number.js';

export interface About {
  readonly address: string;
  readonly question: string;
}

/** No reading is longer; the patterns of driver files are not let loose on more. */
const longest = 1000;

const no = /^(?:.*[^A-Z0-9.])?(?:[+-]?0+|OFF|FALSE|NO)$/i;

/**
 * The number in a reply: the whole reply, or what the driver's pattern calls `value`.
 * @throws ReplyNotUnderstoodError
 */
export function readNumber(
  reply: string,
  reading: Extract<DriverReading, { kind: 'number' }>,
  about: About,
): Measurement {
  if (reading.pattern === undefined) return parseScpiNumber(reply, about);
  const value = reply.length <= longest ? reading.pattern.exec(reply.trim())?.groups?.['value'] : undefined;
  if (value === undefined) {
    throw new ReplyNotUnderstoodError({
      ...about,
      reply,
      expected: `a reply that fits /${reading.pattern.source}/`,
    });
  }
  return parseScpiNumber(value, about);
}

/**
 * The number of the channel in a reply; null where the reply names none.
 * @throws ReplyNotUnderstoodError
 */
export function readChannel(
  reply: string,
  reading: Extract<DriverReading, { kind: 'channel' }>,
  about: About,
): number | null {
  const expected = `a reply in which /${reading.channelIn.source}/ finds a channel`;
  if (reply.length > longest) throw new ReplyNotUnderstoodError({ ...about, reply, expected });
  const value = reading.channelIn.exec(reply.trim())?.groups?.['value'];
  if (value === undefined) return null;
  if (!/^\d{1,6}$/.test(value)) throw new ReplyNotUnderstoodError({ ...about, reply, expected });
  return Number(value);
}

/**
 * Yes or no. Yes is what the driver says; no must be said as well (`0`, `OFF`, `FALSE` or `NO`, alone or at
 * the end, or what the driver says): a reply that makes no sense must never stand for "the input is off".
 * @throws ReplyNotUnderstoodError
 */
export function readFlag(
  reply: string,
  reading: Extract<DriverReading, { kind: 'flag' }>,
  about: About,
): boolean {
  const text = reply.length <= longest ? reply.trim() : '';
  if (text.search(reading.trueWhen) !== -1) return true;
  const { falseWhen = no } = reading;
  if (text !== '' && text.search(falseWhen) !== -1) return false;
  const expectedNo = falseWhen === no ? '0, OFF, FALSE or NO,' : `/${falseWhen.source}/`;
  throw new ReplyNotUnderstoodError({
    ...about,
    reply,
    expected: `a reply that fits /${reading.trueWhen.source}/, or ${expectedNo}`,
  });
}
