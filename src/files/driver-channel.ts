import type { Driver, DriverReading, Message } from './driver.js';

/**
 * A driver of one channel of an instrument with several: the channel is chosen before each operation and each
 * reading, before `prepare` and `release`, and `{channel}` is filled in. What is told or asked of the instrument
 * as a whole stays as it is. A driver without channels is itself.
 */
export function driverOfChannel(driver: Driver, channel: number): Driver {
  const { channels, ...others } = driver;
  if (channels === undefined) return driver;
  const filled = (message: Message): Message => ({
    ...message,
    text: message.text.replaceAll('{channel}', String(channel)),
  });
  const select = channels.select.map((message): Message => ({ ...filled(message), selectsChannel: true }));
  const chosen = (messages: readonly Message[]): readonly Message[] =>
    messages.length === 0 ? messages : [...select, ...messages.map(filled)];
  return {
    ...others,
    prepare: chosen(driver.prepare),
    release: chosen(driver.release),
    operations: ofEach(driver.operations, chosen),
    readings: ofEach(driver.readings, (reading) => readingOf(reading, chosen)),
  };
}

function readingOf(
  reading: DriverReading,
  chosen: (messages: readonly Message[]) => readonly Message[],
): DriverReading {
  const ask = chosen(reading.ask);
  if (reading.kind !== 'number' || reading.ranges === undefined) return { ...reading, ask };
  return {
    ...reading,
    ask,
    ranges: reading.ranges.map(({ upTo, select }) => ({ upTo, select: chosen(select) })),
  };
}

function ofEach<From, To>(
  record: Readonly<Record<string, From>>,
  change: (from: From) => To,
): Readonly<Record<string, To>> {
  return Object.fromEntries(Object.entries(record).map(([name, each]) => [name, change(each)]));
}
