import type { DriverReading } from '../files/driver.js';
import { longestSearched } from '../files/expression.js';
import { ReplyNotUnderstoodError } from './reply-errors.js';
import { parseScpiNumber, type Measurement } from './scpi-number.js';

export interface About {
  readonly address: string;
  readonly question: string;
}

const no = /^(?:.*[^A-Z0-9.])?(?:[+-]?0+|OFF|FALSE|NO)$/i;

/** What is longer than any reading makes no sense, whatever is in it. */
function searchedIn(reply: string): string | undefined {
  return reply.length <= longestSearched ? reply.trim() : undefined;
}

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
  const text = searchedIn(reply);
  const value = text === undefined ? undefined : reading.pattern.group('value', text);
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
  const text = searchedIn(reply);
  if (text === undefined) throw new ReplyNotUnderstoodError({ ...about, reply, expected });
  const value = reading.channelIn.group('value', text);
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
  const text = searchedIn(reply);
  const { trueWhen, falseWhen } = reading;
  if (text !== undefined && trueWhen.finds(text)) return true;
  if (text !== undefined && text !== '' && (falseWhen?.finds(text) ?? no.test(text))) return false;
  const expectedNo = falseWhen === undefined ? '0, OFF, FALSE or NO,' : `/${falseWhen.source}/`;
  throw new ReplyNotUnderstoodError({
    ...about,
    reply,
    expected: `a reply that fits /${trueWhen.source}/, or ${expectedNo}`,
  });
}
