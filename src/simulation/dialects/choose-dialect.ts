import type { Driver, Message, Role } from '../../files/driver.js';
import { NotUnderstoodBySimulationError, UnknownDialectError } from '../simulation-errors.js';
import { loadAtRest } from '../virtual-load.js';
import { sourceAtRest } from '../virtual-source.js';
import { channelLoad } from './channel-load.js';
import { configuredMeter } from './configured-meter.js';
import { dcSource } from './dc-source.js';
import type { Dialect, Interpreter } from './dialect.js';
import { functionMeter } from './function-meter.js';
import { queryMeter } from './query-meter.js';
import { queryThermometer } from './query-thermometer.js';
import { remoteLoad } from './remote-load.js';
import { routedScanner } from './routed-scanner.js';
import { shortLoad } from './short-load.js';
import { standardLoad } from './standard-load.js';

/** Every way of speaking there is; to add one is one file and its place here. */
export const dialects: readonly Dialect[] = [
  // It understands all that the standard load does, once it is in remote: only who says so first means it.
  remoteLoad,
  standardLoad,
  shortLoad,
  channelLoad,
  configuredMeter,
  queryMeter,
  functionMeter,
  routedScanner,
  queryThermometer,
  dcSource,
];

/**
 * The first dialect of the driver's role that understands every message of the driver, or the one that is
 * named.
 * @throws NotUnderstoodBySimulationError naming the message that the most willing dialect did not understand.
 * @throws UnknownDialectError
 */
export function dialectFor(driver: Driver, named?: string): Dialect {
  const ofRole = dialects.filter(({ role }) => role === driver.role);
  if (named !== undefined && named !== '') return dialectNamed(ofRole, driver.role, named);
  const messages = messagesOf(driver);
  let furthest = 0;
  for (const dialect of ofRole) {
    const understood = firstUnknown(dialect, messages);
    if (understood === messages.length) return dialect;
    furthest = Math.max(furthest, understood);
  }
  throw new NotUnderstoodBySimulationError({
    driver: driver.name,
    unknownMessage: messages[furthest]?.text ?? '',
    dialects: ofRole.map(({ name }) => name),
  });
}

function dialectNamed(ofRole: readonly Dialect[], role: Role, named: string): Dialect {
  const found = ofRole.find(({ name }) => name === named);
  if (found === undefined) {
    throw new UnknownDialectError({ dialect: named, role, dialects: ofRole.map(({ name }) => name) });
  }
  return found;
}

interface DriverMessage {
  readonly text: string;
  readonly answered: boolean;
}

/** All that the driver may send, with 1 for each value. */
function messagesOf(driver: Driver): readonly DriverMessage[] {
  const order = ({ text }: Message): DriverMessage => ({
    text: text.replace(/\{\w+\}/g, '1'),
    answered: false,
  });
  const asked = (ask: readonly Message[]): DriverMessage[] =>
    ask.map((message, index) => ({ ...order(message), answered: index === ask.length - 1 }));
  return [
    ...driver.remote.map(order),
    ...asked([{ text: driver.identify }]),
    ...(driver.errors === 'none' ? [] : asked([{ text: driver.errors.ask }])),
    ...(driver.ready === undefined ? [] : asked([{ text: driver.ready.ask }])),
    ...(driver.channels?.select ?? []).map(order),
    ...driver.prepare.map(order),
    ...Object.values(driver.operations).flatMap((messages) => messages.map(order)),
    ...Object.values(driver.readings).flatMap(({ ask }) => asked(ask)),
    ...driver.release.map(order),
    ...driver.local.map(order),
  ];
}

/** Which message is the first that this dialect does not take as the driver means it. */
function firstUnknown(dialect: Dialect, messages: readonly DriverMessage[]): number {
  const trial = wakeForTrial(dialect);
  const unknown = messages.findIndex(({ text, answered }) => {
    const { reply, understood } = trial.hear(text);
    return !understood || (reply !== undefined) !== answered;
  });
  return unknown === -1 ? messages.length : unknown;
}

/** Hands that reach nothing, to hear how a dialect takes a message. */
function wakeForTrial(dialect: Dialect): Interpreter {
  const nothing = { identity: 'trial', measure: () => 0 };
  switch (dialect.role) {
    case 'load':
      return dialect.wake({
        ...nothing,
        most: { current: 1000, voltage: 1000 },
        state: () => loadAtRest,
        set: () => undefined,
      });
    case 'meter':
      return dialect.wake({ ...nothing, mode: () => 'voltage', setMode: () => undefined });
    case 'scanner':
      return dialect.wake({ ...nothing, closed: () => [], close: () => undefined, open: () => undefined });
    case 'thermometer':
      return dialect.wake(nothing);
    case 'source':
      return dialect.wake({
        ...nothing,
        most: { current: 1000, voltage: 1000 },
        state: () => sourceAtRest,
        set: () => undefined,
      });
  }
}
