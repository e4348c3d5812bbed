import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll } from 'vitest';
import { type JournalEvent, journalFormat, phases, type TimedEvent } from '../../src/record/journal-event.js';
import { checkJournal, type Integrity } from '../../src/record/journal-check.js';
import { readJournal } from '../../src/record/journal-reader.js';
import { JournalWriter } from '../../src/record/journal-writer.js';
import fc from '../property.js';

/** A folder that is there for the tests of one file. */
export function temporaryFolder(): (name: string) => string {
  const folder = mkdtempSync(join(tmpdir(), 'railproof-record-'));
  afterAll(() => {
    rmSync(folder, { recursive: true, force: true });
  });
  return (name) => join(folder, name);
}

export const opened: JournalEvent = {
  event: 'opened',
  format: journalFormat,
  wallClock: '2026-11-20T09:00:00.000Z',
  header: '',
};

const reading = (point: number, sample: number, of: string, what: string, value: number): JournalEvent => ({
  event: 'reading',
  step: 1,
  point,
  sample,
  of,
  what,
  value,
});

/** A short run on K1, as it would be journalled. */
export const shortRun: readonly JournalEvent[] = [
  opened,
  { event: 'instrument', role: 'load', address: 'tcp://127.0.0.1:5025', identity: 'NURSERY,LOAD,1,1' },
  { event: 'caution', name: 'mains', by: 'operator' },
  { event: 'step-began', step: 1, kind: 'load-ramp' },
  { event: 'input', state: 'on', confirmed: true },
  { event: 'point-began', step: 1, point: 1, phase: 'ramp', set: { current: 2 } },
  reading(1, 1, 'meter', 'voltage', 15.174),
  reading(1, 1, 'load', 'voltage', 15.104),
  reading(1, 1, 'load', 'current', 1.9987),
  reading(1, 2, 'meter', 'voltage', 15.175),
  {
    event: 'reading',
    step: 1,
    point: 1,
    sample: 2,
    of: 'load',
    what: 'voltage',
    value: null,
    problem: 'overload',
  },
  reading(1, 2, 'load', 'current', 1.9991),
  { event: 'point-ended', step: 1, point: 1, outcome: 'held' },
  { event: 'notice', text: 'a "quoted" notice, with a comma and a µ' },
  { event: 'input', state: 'off', confirmed: true },
  { event: 'step-ended', step: 1 },
  { event: 'ended', how: 'completed', reason: null, status: 0 },
];

/** Writes a journal as a run does, 0.1 s from event to event. */
export function writeJournal(path: string, events: readonly JournalEvent[]): readonly TimedEvent[] {
  let now = 100;
  const writer = new JournalWriter(path, () => now);
  const timed = events.map((event, index) => {
    now = 100 + index / 10;
    writer.append(event);
    return { t: Math.round((now - 100) * 1e6) / 1e6, ...event };
  });
  writer.close();
  return timed;
}

/** The events without their seals, and how much of the journal can be believed. */
export function readBack(path: string): {
  readonly events: readonly TimedEvent[];
  readonly integrity: Integrity;
} {
  const events: TimedEvent[] = [];
  const integrity = readJournal(path, checkJournal(path), (event) => {
    const { seal, ...rest } = event as TimedEvent & { seal?: string };
    events.push(rest);
    if (seal !== undefined && !/^[0-9a-f]{64}$/.test(seal)) throw new Error(`not a seal: ${seal}`);
  });
  return { events, integrity };
}

const count = fc.integer({ min: 1, max: 1e6 });
const number = fc.double({ noNaN: true, noDefaultInfinity: true }).map((value) => value + 0);
const text = fc.string({ unit: 'binary', maxLength: 40 });

/** Any event but the first and the last. */
export const anyEvent: fc.Arbitrary<JournalEvent> = fc.oneof(
  fc.record({ event: fc.constant('instrument' as const), role: text, address: text, identity: text }),
  fc.record({ event: fc.constant('step-began' as const), step: count, kind: text }),
  fc.record({
    event: fc.constant('point-began' as const),
    step: count,
    point: count,
    phase: fc.constantFrom(...phases),
    set: fc.record({ current: number, voltage: number }, { requiredKeys: [] }),
  }),
  fc.record(
    {
      event: fc.constant('reading' as const),
      step: count,
      point: count,
      sample: count,
      of: text,
      what: text,
      value: fc.option(number),
      problem: fc.constantFrom('overload' as const, 'not-a-number' as const),
    },
    { requiredKeys: ['event', 'step', 'point', 'sample', 'of', 'what', 'value'] },
  ),
  fc.record({
    event: fc.constant('point-ended' as const),
    step: count,
    point: count,
    outcome: fc.constantFrom('held' as const, 'dropped' as const, 'measured' as const),
  }),
  fc.record({
    event: fc.constant('input' as const),
    state: fc.constantFrom('on' as const, 'off' as const),
    confirmed: fc.boolean(),
  }),
  fc.record({
    event: fc.constant('recovery' as const),
    step: count,
    outcome: fc.constantFrom('came-back' as const, 'stayed-off' as const, 'came-back-after-cycling' as const),
    after: number,
    within: number,
  }),
  fc.record({ event: fc.constant('answer' as const), step: count, name: text, answer: text, value: number }),
  fc.record({ event: fc.constant('notice' as const), text }),
  fc.record({ event: fc.constant('guard-tripped' as const), guard: text, text }),
);
