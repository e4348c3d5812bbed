import { shown } from '../quantity/shown-text.js';
import {
  operationsOf,
  readingsOf,
  type Channels,
  type DriverReading,
  type ErrorReport,
  type Message,
  type Readiness,
  type Role,
} from './driver.js';
import { dialogueProblems } from './driver-dialogue-checks.js';
import type { Exchange } from './driver-dialogue.js';
import { didYouMean } from '../quantity/nearest.js';
import { readingProblems } from './driver-reading-checks.js';
import type { Complaint } from './yaml-document.js';

/** The parts of a driver file whose rules depend on each other. */
export interface DriverFile {
  readonly role: Role;
  readonly identify: string;
  readonly errors: 'none' | ErrorReport;
  readonly ready?: Readiness | undefined;
  readonly channels?: Channels | undefined;
  readonly remote: readonly Message[];
  readonly prepare: readonly Message[];
  readonly release: readonly Message[];
  readonly local: readonly Message[];
  readonly operations: Readonly<Record<string, readonly Message[]>>;
  readonly readings: Readonly<Record<string, DriverReading>>;
  readonly accuracy: Readonly<Record<string, unknown>>;
  readonly dialogue?: readonly Exchange[] | undefined;
}

/** What stands for the value in the messages of an operation that has one. */
export const placeholderOf: Readonly<Record<string, string>> = {
  'set-current': '{amps}',
  'protect-current': '{amps}',
  'set-voltage': '{volts}',
  'protect-voltage': '{volts}',
  'protect-power': '{watts}',
  'close-channel': '{channel}',
};

/** An instrument is not made safe by silence: these operations must send something. */
const mustSend: Readonly<Record<Role, readonly string[]>> = {
  load: ['make-safe', 'input-on', 'input-off', 'set-current'],
  meter: [],
  thermometer: [],
  scanner: ['open-all', 'close-channel'],
  source: ['make-safe', 'output-on', 'output-off'],
};

/** What no key alone can tell: whether the role's operations and readings are there, and their placeholders right. */
export function driverProblems(driver: DriverFile): Complaint[] {
  return [
    ...missingOrForeign(driver),
    ...silentOperations(driver),
    ...operationPlaceholders(driver),
    ...strayPlaceholders(driver),
    ...readingProblems(driver),
    ...channelProblems(driver),
    ...neverReady(driver),
    ...waitedForUnasked(driver),
    ...dialogueProblems(driver),
  ];
}

function* missingOrForeign(driver: DriverFile): Generator<Complaint> {
  const { role } = driver;
  const parts = [
    { key: 'operations', word: 'operation', given: driver.operations, known: operationsOf[role] },
    { key: 'readings', word: 'reading', given: driver.readings, known: readingsOf[role] },
  ] as const;
  for (const { key, word, given, known } of parts) {
    const names: readonly string[] = [...known.must, ...known.may];
    for (const each of Object.keys(given)) {
      if (names.includes(each)) continue;
      const hint = didYouMean(each, names) || (names.length === 0 ? '' : `; it has ${names.join(', ')}`);
      yield { path: [key, each], message: `a ${role} has no ${word} '${each}'${hint}` };
    }
    for (const each of known.must) {
      if (!Object.hasOwn(given, each))
        yield { path: [key, each], message: `missing; a ${role} needs this ${word}` };
    }
  }
}

function* silentOperations({ role, operations }: DriverFile): Generator<Complaint> {
  for (const operation of mustSend[role]) {
    if (operations[operation]?.length !== 0) continue;
    yield { path: ['operations', operation], message: 'at least one message is needed' };
  }
}

function* operationPlaceholders(driver: DriverFile): Generator<Complaint> {
  for (const [operation, messages] of Object.entries(driver.operations)) {
    const due = placeholderOf[operation];
    const path = ['operations', operation];
    const strays = messages.flatMap((message, index) =>
      placeholdersIn(message.text)
        .filter((each) => each !== due && !(each === '{channel}' && driver.channels))
        .map((each) => ({ path: [...path, index], message: stray(each, due) })),
    );
    yield* strays;
    if (due === undefined || messages.length === 0 || strays.length > 0) continue;
    if (messages.some(({ text }) => text.includes(due))) continue;
    yield { path, message: `no message holds ${due}, which stands for the value` };
  }
}

function* strayPlaceholders(driver: DriverFile): Generator<Complaint> {
  const asked = (path: string[], ask: string | undefined): [PropertyKey[], string][] =>
    ask === undefined ? [] : [[path, ask]];
  const listed = (path: PropertyKey[], messages: readonly Message[]): [PropertyKey[], string][] =>
    messages.map(({ text }, index) => [[...path, index], text]);
  const ofNoChannel = [
    ...asked(['identify'], driver.identify),
    ...asked(['errors', 'ask'], driver.errors === 'none' ? undefined : driver.errors.ask),
    ...asked(['ready', 'ask'], driver.ready?.ask),
    ...listed(['remote'], driver.remote),
    ...listed(['local'], driver.local),
    ...listed(['errors', 'afterwards'], afterwardsOf(driver)),
  ];
  const ofAChannel = [
    ...listed(['channels', 'select'], driver.channels?.select ?? []),
    ...listed(['prepare'], driver.prepare),
    ...listed(['release'], driver.release),
    ...Object.entries(driver.readings).flatMap(([reading, { ask }]) =>
      ask.flatMap(({ text }) => asked(['readings', reading, 'ask'], text)),
    ),
    ...rangeSelections(driver).flatMap(([path, messages]) => listed(path, messages)),
  ];
  for (const [path, text] of ofNoChannel) {
    for (const each of placeholdersIn(text)) yield { path, message: stray(each, undefined) };
  }
  for (const [path, text] of ofAChannel) {
    for (const each of placeholdersIn(text)) {
      if (each !== '{channel}' || driver.channels === undefined) {
        yield { path, message: stray(each, driver.channels && '{channel}') };
      }
    }
  }
}

function* channelProblems({ role, channels }: DriverFile): Generator<Complaint> {
  if (channels === undefined) return;
  if (role === 'scanner') {
    yield { path: ['channels'], message: "a scanner's channels are closed one by one; it has no others" };
  } else if (channels.last < channels.first) {
    yield { path: ['channels', 'to'], message: 'the highest channel is below the lowest' };
  }
}

/** Who is waited for until it is ready must be able to say so. */
function* neverReady(driver: DriverFile): Generator<Complaint> {
  if (driver.ready !== undefined) return;
  const lists: [PropertyKey[], readonly Message[]][] = [
    [['remote'], driver.remote],
    [['prepare'], driver.prepare],
    [['release'], driver.release],
    [['channels', 'select'], driver.channels?.select ?? []],
    ...rangeSelections(driver),
    ...Object.entries(driver.operations).map(([name, messages]): [PropertyKey[], readonly Message[]] => [
      ['operations', name],
      messages,
    ]),
    ...Object.entries(driver.readings).map(([name, { ask }]): [PropertyKey[], readonly Message[]] => [
      ['readings', name, 'ask'],
      ask,
    ]),
  ];
  for (const [path, messages] of lists) {
    if (!messages.some(({ untilReady }) => untilReady === true)) continue;
    yield { path, message: "'until: ready' needs a 'ready' in this file, which says how it is asked for" };
  }
}

/** After these nothing is asked, so nothing can be waited for. */
function* waitedForUnasked(driver: DriverFile): Generator<Complaint> {
  const lists: [PropertyKey[], readonly Message[]][] = [
    [['local'], driver.local],
    [['errors', 'afterwards'], afterwardsOf(driver)],
  ];
  for (const [path, messages] of lists) {
    for (const [index, { untilReady }] of messages.entries()) {
      if (untilReady !== true) continue;
      yield {
        path: [...path, index],
        message: "nothing is asked here; give it a 'rest' in place of 'until'",
      };
    }
  }
}

function afterwardsOf({ errors }: DriverFile): readonly Message[] {
  return errors === 'none' ? [] : errors.afterwards;
}

function rangeSelections({ readings }: DriverFile): [PropertyKey[], readonly Message[]][] {
  return Object.entries(readings).flatMap(([name, reading]) =>
    reading.kind !== 'number' || reading.ranges === undefined
      ? []
      : reading.ranges.map(({ select }, index): [PropertyKey[], readonly Message[]] => [
          ['readings', name, 'ranges', index, 'select'],
          select,
        ]),
  );
}

function placeholdersIn(message: string): string[] {
  return message.match(/\{[^{}]*\}/g) ?? [];
}

function stray(placeholder: string, due: string | undefined): string {
  const hint =
    due === undefined
      ? '; none is filled in here'
      : didYouMean(placeholder, [due]) || `; ${due} is known here`;
  return `unknown placeholder ${shown(placeholder)}${hint}`;
}
