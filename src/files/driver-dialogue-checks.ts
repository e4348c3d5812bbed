import { didYouMean } from '../quantity/nearest.js';
import type { Channels, Driver } from './driver.js';
import type { Exchange } from './driver-dialogue.js';
import type { Complaint } from './yaml-document.js';

/** What of a driver its dialogue speaks of. */
type Spoken = Pick<Driver, 'errors' | 'operations' | 'readings'> & {
  readonly channels?: Channels | undefined;
  readonly ready?: Driver['ready'] | undefined;
  readonly dialogue?: readonly Exchange[] | undefined;
};

/** Exchanges about what the driver does not have. */
export function* dialogueProblems(driver: Spoken): Generator<Complaint> {
  for (const [index, exchange] of (driver.dialogue ?? []).entries()) {
    const path = ['dialogue', index];
    switch (exchange.kind) {
      case 'operation':
        yield* unknownName(path, exchange.kind, exchange.operation, driver.operations);
        yield* foreignChannel(path, exchange.channel, driver.channels);
        break;
      case 'reading':
        yield* unknownName(path, exchange.kind, exchange.reading, driver.readings);
        yield* foreignChannel(path, exchange.channel, driver.channels);
        break;
      case 'errors':
        if (driver.errors === 'none')
          yield { path: [...path, 'errors'], message: 'this driver asks for none' };
        break;
      case 'ready':
        if (driver.ready === undefined)
          yield { path: [...path, 'ready'], message: "there is no 'ready' in this file" };
        break;
      case 'identity':
        break;
    }
  }
}

function* unknownName(
  path: readonly PropertyKey[],
  key: 'operation' | 'reading',
  name: string,
  has: Readonly<Record<string, unknown>>,
): Generator<Complaint> {
  if (Object.hasOwn(has, name)) return;
  const names = Object.keys(has);
  const hint = didYouMean(name, names) || `; it has ${names.join(', ') || 'none'}`;
  yield { path: [...path, key], message: `this driver has no ${key} '${name}'${hint}` };
}

function* foreignChannel(
  path: readonly PropertyKey[],
  channel: number | undefined,
  channels: Channels | undefined,
): Generator<Complaint> {
  if (channel === undefined) return;
  const at = [...path, 'channel'];
  if (channels === undefined) yield { path: at, message: "this driver has no 'channels'" };
  else if (channel < channels.first || channel > channels.last)
    yield { path: at, message: `the channels are ${channels.first} to ${channels.last}` };
}
