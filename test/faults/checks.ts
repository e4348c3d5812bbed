import type { ExpectStatic } from 'vitest';
import type { TimedEvent } from '../../src/record/journal-event.js';
import { checkJournal } from '../../src/record/journal-check.js';
import { readJournal } from '../../src/record/journal-reader.js';
import type { Cell, Given } from './cell.js';
import type { FaultName } from './faults.js';
import { type Moment, scenes } from './moments.js';
import { promises } from './promises.js';

/** Holds what came of a run against what was promised. */
export function keepsItsPromise(expect: ExpectStatic, cell: Cell, fault: FaultName, moment: Moment): void {
  const row = promises[fault];
  const promised = row[moment];
  const { events, integrity } = journalOf(cell);
  expect.soft({ status: cell.status }, cell.stderr).toEqual({ status: promised.status });
  expect.soft(cell.stderr).toMatch(withAddresses(row.saysAt?.[moment] ?? row.says, cell));
  loadIsOff(expect, cell, promised.load);
  if (promised.load === 'read back') offIsKept(expect, events);
  readingsAreKept(expect, events, cell.given, fault === 'disk-full');
  expect.soft(integrity).toMatchObject({ kind: 'whole' });
  const times = events.map(({ t }) => t);
  expect.soft(times).toEqual(times.toSorted((one, other) => one - other));
  if (promised.status === 0) expect.soft(heldIn(events, moment)).toEqual(scenes[moment].held.currents);
  expect.soft(cell.leftBehind).toEqual([]);
  expect.soft(cell.stillConnected).toBe(0);
}

/** At the instrument, wherever it hears us; and what is said to whoever stands there. */
function loadIsOff(
  expect: ExpectStatic,
  { input, stderr }: Cell,
  promised: 'read back' | 'by hand, and off' | 'by hand',
): void {
  if (promised !== 'by hand') expect.soft(input).toEqual({ says: '0', is: 'off' });
  const lastWords = stderr.trimEnd().split('\n').at(-1);
  expect
    .soft(lastWords)
    .toMatch(
      promised === 'read back'
        ? /^The load is off; it was read back\.$/
        : /^THE LOAD MAY STILL BE ON\. Switch its input off at its front panel/,
    );
}

/** A record of a load that was on says that it went off. */
function offIsKept(expect: ExpectStatic, events: readonly TimedEvent[]): void {
  const last = events.findLast((event) => event.event === 'input');
  if (last !== undefined) expect.soft(last).toMatchObject({ state: 'off', confirmed: true });
}

/**
 * Every answer to a question for a reading is in the journal, in order, and nothing else is. On a full disk
 * the last one was read, and had no room.
 */
function readingsAreKept(
  expect: ExpectStatic,
  events: readonly TimedEvent[],
  given: readonly Given[],
  lastMayLack: boolean,
): void {
  const kept = events.flatMap((event): Given[] =>
    event.event === 'reading'
      ? [{ of: event.of, what: event.what, value: event.value ?? event.problem ?? Number.NaN }]
      : [],
  );
  const due = lastMayLack && kept.length === given.length - 1 ? given.slice(0, -1) : given;
  expect.soft(kept).toEqual(due);
}

/** The currents that were held in points which count, each once, in order. */
function heldIn(events: readonly TimedEvent[], moment: Moment): number[] {
  const { phases } = scenes[moment].held;
  const held = events.flatMap((event, index): number[] => {
    if (event.event !== 'point-ended' || event.outcome !== 'held') return [];
    const began = events
      .slice(0, index)
      .findLast((one) => one.event === 'point-began' && one.step === event.step && one.point === event.point);
    if (began?.event !== 'point-began' || !phases.includes(began.phase)) return [];
    return [began.set.current ?? Number.NaN];
  });
  return [...new Set(held)];
}

function journalOf({ journal }: Cell): {
  readonly events: readonly TimedEvent[];
  readonly integrity: ReturnType<typeof checkJournal>;
} {
  const events: TimedEvent[] = [];
  const integrity = readJournal(journal, checkJournal(journal), (event) => events.push(event));
  return { events, integrity };
}

/** `LOAD` and `METER` stand for their addresses. */
function withAddresses(words: RegExp, { addresses }: Cell): RegExp {
  const literal = (address: string): string => address.replace(/[.*+?^${}()|[\]\\]/g, '\\$&');
  return new RegExp(
    words.source.replace('LOAD', literal(addresses.load)).replace('METER', literal(addresses.meter)),
  );
}
