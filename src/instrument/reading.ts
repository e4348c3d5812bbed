import type { DriverReading } from '../files/driver.js';
import { longestSearched } from '../files/expression.js';
import { dimensionWords } from '../quantity/dimension-words.js';
import { product, shifted } from '../quantity/decimal-text.js';
import type { DriverPart } from './driver-part.js';
import { placesOf } from './reply-unit.js';
import { ReplyNotUnderstoodError } from './reply-errors.js';
import { parseScpiNumber, type Measurement } from './scpi-number.js';

export interface About {
  readonly address: string;
  readonly question: string;
  /** What in the driver says how to read it. */
  readonly part?: DriverPart;
}

const no = /^(?:.*[^A-Z0-9.])?(?:[+-]?0+|OFF|FALSE|NO)$/i;

/** What is longer than any reading makes no sense, whatever is in it. */
function searchedIn(reply: string): string | undefined {
  return reply.length <= longestSearched ? reply.trim() : undefined;
}

/**
 * The number in a reply, in the unit of its dimension: the whole reply, or what the driver's pattern calls
 * `value`. Where the reply names its unit, in what the pattern calls `unit`, that counts and not the driver's.
 * @throws ReplyNotUnderstoodError; also when the unit could be two, or is none of what is measured
 */
export function readNumber(
  reply: string,
  reading: Extract<DriverReading, { kind: 'number' }>,
  about: About,
): Measurement {
  const { pattern, dimension, factor, scale = 1 } = reading;
  if (pattern === undefined) return times(parseScpiNumber(reply, about), factor);
  const text = searchedIn(reply);
  const value = text === undefined ? undefined : pattern.group('value', text);
  if (text === undefined || value === undefined) {
    throw new ReplyNotUnderstoodError({
      ...about,
      reply,
      expected: `a reply that fits /${pattern.source}/`,
    });
  }
  const measurement = parseScpiNumber(value, about);
  const unit = pattern.group('unit', text)?.trim() ?? '';
  if (unit === '') return times(measurement, factor);
  const places = placesOf(unit, dimension);
  if (places !== undefined) return times(measurement, shifted(scale, places));
  const expected = `${dimensionWords[dimension].name} in a unit that can be read in one way only`;
  throw new ReplyNotUnderstoodError({ ...about, reply, expected });
}

/** What is no value stays what it is. */
function times(measurement: Measurement, factor: number): Measurement {
  if (measurement.kind !== 'value' || factor === 1) return measurement;
  return { kind: 'value', value: product(measurement.value, factor) };
}

/** An empty channel list (SCPI-99, volume 1, 8.3.2; from memory), in a block or not. */
const emptyList = /^(?:#(?:0|[1-9]\d{1,9}))?\s*\(\s*@\s*\)$/;

/**
 * The number of the channel in a reply; null where it says that none is closed (an empty list, or what the driver
 * says): a reply that makes no sense must never stand for that.
 * @throws ReplyNotUnderstoodError
 */
export function readChannel(
  reply: string,
  reading: Extract<DriverReading, { kind: 'channel' }>,
  about: About,
): number | null {
  const { channelIn, noneWhen } = reading;
  const text = searchedIn(reply);
  // First, since what finds a channel may find the length of a block that holds no list.
  if (text !== undefined && (noneWhen?.finds(text) ?? emptyList.test(text))) return null;
  const value = text === undefined ? undefined : channelIn.group('value', text);
  if (value !== undefined && /^\d{1,6}$/.test(value)) return Number(value);
  const none = noneWhen === undefined ? '(@)' : `/${noneWhen.source}/`;
  throw new ReplyNotUnderstoodError({
    ...about,
    reply,
    expected: `a reply in which /${channelIn.source}/ finds a channel, or ${none} where none is closed`,
  });
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
