import { mkdtempSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { sealedEvents, type TimedEvent } from '../../../src/record/journal-event.js';
import { makeRunFolder, replaceFile, writeHeader } from '../../../src/record/run-folder.js';
import { newSealer, sealLine } from '../../../src/record/seal.js';
import { runPage } from '../../../src/report/run-page/run-page.js';
import { understand } from '../../../src/report/understand.js';
import { evenly, eventsOf } from '../../analysis/evidence-of.js';
import { soak, thermometerHeader, warming } from '../../analysis/soak-events.js';
import { brick } from '../run-charts/made-results.js';

const made = { program: 'railproof test', date: new Date('2026-12-02T18:20:00Z') };
const runs = mkdtempSync(join(tmpdir(), 'railproof-long-'));

afterAll(() => {
  rmSync(runs, { recursive: true, force: true });
});

/** A ramp of very many points, and a soak of very many looks after it: a third of the readings are the ramp's. */
function eventsWith(readings: number): readonly TimedEvent[] {
  const ramp = eventsOf([
    {
      kind: 'load-ramp',
      points: evenly(0, 4, Math.round(readings / 9)).map((set, index) => ({
        set,
        samples: [{ meter: brick(set) + 0.001 * Math.sin(index * 7), load: brick(set), current: set }],
      })),
    },
  ]);
  const from = ramp.at(-1)?.t ?? 0;
  const until = 36_000;
  const looks = Math.round(readings / 9);
  const held = soak(2, from, { temperature: warming, until, every: until / looks });
  const end = held.at(-1)?.t ?? from;
  return [
    ...ramp.slice(0, -1),
    ...held,
    { t: end, event: 'step-ended', step: 2 },
    { t: end, event: 'ended', how: 'completed', reason: null, status: 0 },
  ];
}

/** The folder of a record that holds these, every seal in its place. */
function recordOf(events: readonly TimedEvent[]): ReturnType<typeof makeRunFolder> {
  const folder = makeRunFolder(runs, made.date, 'K1', 'long');
  const opened = { header: writeHeader(folder, thermometerHeader()) };
  const hash = newSealer();
  const lines = events.map((event) => {
    const line = JSON.stringify(event.event === 'opened' ? { ...event, ...opened } : event);
    const written = sealedEvents.has(event.event) ? sealLine(hash, line) : line;
    hash.update(written).update('\n');
    return `${written}\n`;
  });
  writeFileSync(folder.journal, lines.join(''));
  return folder;
}

describe('the report of a record of 100 000 readings', () => {
  let bytes: number;
  let seconds: number;
  let readings: number;

  beforeAll(() => {
    const folder = recordOf(eventsWith(100_000));
    const before = process.cpuUsage();
    const result = understand(folder.path);
    replaceFile(folder.report, runPage(result, made));
    const { user, system } = process.cpuUsage(before);
    seconds = (user + system) / 1e6;
    bytes = statSync(folder.report).size;
    readings = result.evidence.readings;
    expect(result.integrity.kind).toBe('whole');
  }, 120_000);

  it('is under 3 MB', () => {
    expect(readings).toBeGreaterThan(99_000);
    expect(bytes).toBeGreaterThan(50_000);
    expect(bytes).toBeLessThan(3_000_000);
  });

  // 3 s on a machine that has nothing else to do; here in time of the processor, as others may be busy beside it.
  it('is written, from reading the record on, in little time', () => {
    expect(seconds).toBeLessThan(9);
  });

  it('is hardly longer than that of a quarter of the readings', () => {
    const quarter = understand(recordOf(eventsWith(25_000)).path);
    expect(runPage(quarter, made).length).toBeGreaterThan(bytes / 2);
  });
});
