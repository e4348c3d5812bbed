import { existsSync, readdirSync, readFileSync, symlinkSync } from 'node:fs';
import { parse } from 'csv-parse/sync';
import { describe, expect, it } from 'vitest';
import type { JournalEvent } from '../../src/record/journal-event.js';
import { writeReadingsCsv } from '../../src/record/readings-csv.js';
import { makeRunFolder, type RunFolder } from '../../src/record/run-folder.js';
import { opened, shortRun, temporaryFolder, writeJournal } from './some-run.js';

const place = temporaryFolder();

function recordOf(events: readonly JournalEvent[]): RunFolder {
  const folder = makeRunFolder(place('runs'), new Date('2026-11-20T09:00:00Z'), 'K1', 'real-limit');
  writeJournal(folder.journal, events);
  return folder;
}

function rowsOf(folder: RunFolder): Record<string, string>[] {
  writeReadingsCsv(folder);
  // Strict: every row must have as many fields as the header, and each record must end in CR LF.
  return parse(readFileSync(folder.readings), { columns: true, record_delimiter: '\r\n' });
}

describe('readings.csv', () => {
  it('has a row for each sample, with the units in the header and empty cells for what was not read', () => {
    const common = {
      step: '1',
      'step kind': 'load-ramp',
      point: '1',
      phase: 'ramp',
      'point outcome': 'held',
      'set current (A)': '2',
    };
    const rest = {
      'set voltage (V)': '',
      'temperature (°C)': '',
      'voltage elsewhere (V)': '',
      'resistance (Ohm)': '',
      'probes at': '',
    };
    expect(rowsOf(recordOf(shortRun))).toEqual([
      {
        'time (s)': '0.6',
        ...common,
        sample: '1',
        ...rest,
        'meter voltage (V)': '15.174',
        'load voltage (V)': '15.104',
        'load current (A)': '1.9987',
      },
      {
        'time (s)': '0.9',
        ...common,
        sample: '2',
        ...rest,
        'meter voltage (V)': '15.175',
        'load voltage (V)': '',
        'load current (A)': '1.9991',
      },
    ]);
  });

  it('holds no cell that a spreadsheet would take for a formula', () => {
    const reading = { event: 'reading', step: 1, point: 1, sample: 1 } as const;
    const rows = rowsOf(
      recordOf([
        opened,
        { event: 'step-began', step: 1, kind: '=1+1' },
        { event: 'point-began', step: 1, point: 1, phase: 'share', set: {} },
        { ...reading, of: 'meter', what: 'voltage', value: -0.4, at: '@SUM(A1)' },
      ]),
    );
    expect(rows).toMatchObject([
      { 'step kind': "'=1+1", 'probes at': "'@SUM(A1)", 'voltage elsewhere (V)': '-0.4' },
    ]);
  });

  it('marks what was interrupted and taken again, and tells a point that was broken off from one that ended', () => {
    const began = (point: number): JournalEvent => ({
      event: 'point-began',
      step: 1,
      point,
      phase: 'ramp',
      set: { current: 2 },
    });
    const read = (point: number, value: number): JournalEvent => ({
      event: 'reading',
      step: 1,
      point,
      sample: 1,
      of: 'load',
      what: 'current',
      value,
    });
    const ended = (point: number, outcome: 'interrupted' | 'held'): JournalEvent => ({
      event: 'point-ended',
      step: 1,
      point,
      outcome,
    });
    const rows = rowsOf(
      recordOf([
        opened,
        { event: 'step-began', step: 1, kind: 'load-ramp' },
        ...[began(1), read(1, 1.5), ended(1, 'interrupted')],
        ...[began(2), read(2, 1e-9), ended(2, 'held')],
        ...[began(3), read(3, 2.01)],
      ]),
    );
    expect(rows.map((row) => [row['point'], row['point outcome'], row['load current (A)']])).toEqual([
      ['1', 'interrupted', '1.5'],
      ['2', 'held', '0.000000001'],
      ['3', '', '2.01'],
    ]);
  });

  it('gives what was read elsewhere a row of its own, which says where the probes were', () => {
    const reading = { event: 'reading', step: 1, point: 1, sample: 1 } as const;
    const rows = rowsOf(
      recordOf([
        opened,
        { event: 'step-began', step: 1, kind: 'sharing-log' },
        { event: 'point-began', step: 1, point: 1, phase: 'share', set: { current: 6 } },
        { ...reading, of: 'meter', what: 'voltage', value: 15.1 },
        { ...reading, of: 'meter', what: 'voltage', value: 0.151, at: 'ballast-of-K1' },
        { ...reading, of: 'meter', what: 'voltage', value: null, at: 'ballast-of-K2' },
        { ...reading, of: 'meter', what: 'resistance', value: 0.2, at: 'leads' },
        { ...reading, of: 'load', what: 'current', value: 6 },
      ]),
    );
    expect(
      rows.map((row) => [row['probes at'], row['voltage elsewhere (V)'], row['resistance (Ohm)']]),
    ).toEqual([
      ['ballast-of-K1', '0.151', ''],
      ['ballast-of-K2', '', ''],
      ['leads', '', '0.2'],
      ['', '', ''],
    ]);
    expect(rows.at(-1)).toMatchObject({ 'meter voltage (V)': '15.1', 'load current (A)': '6' });
  });

  it('ends every line in CR LF, the last one too (RFC 4180)', () => {
    const folder = recordOf(shortRun);
    writeReadingsCsv(folder);
    const text = readFileSync(folder.readings, 'utf8');
    expect(text.split('\r\n')).toHaveLength(4);
    expect(text.endsWith('\r\n')).toBe(true);
    expect(text.replaceAll('\r\n', '')).not.toMatch(/[\r\n]/);
  });

  it('quotes what would break a row', () => {
    const kind = 'a "kind", on\r\ntwo lines';
    const events = shortRun.map((event) => (event.event === 'step-began' ? { ...event, kind } : event));
    expect(rowsOf(recordOf(events)).map((row) => row['step kind'])).toEqual([kind, kind]);
  });

  it('has only its header when nothing was read', () => {
    const folder = recordOf([opened]);
    expect(rowsOf(folder)).toEqual([]);
    expect(readFileSync(folder.readings, 'utf8')).toMatch(/^time \(s\),step,.*\r\n$/);
  });

  it('keeps samples of the same number apart when a point or a step has ended between them', () => {
    const again: JournalEvent[] = [opened];
    for (const step of [1, 2]) {
      again.push({ event: 'step-began', step, kind: 'load-ramp' });
      for (const point of [1, 2]) {
        again.push({ event: 'point-began', step, point, phase: 'ramp', set: { current: point } });
        again.push({
          event: 'reading',
          step,
          point,
          sample: 1,
          of: 'load',
          what: 'current',
          value: 10 * step + point,
        });
      }
    }
    expect(rowsOf(recordOf(again)).map((row) => row['load current (A)'])).toEqual(['11', '12', '21', '22']);
  });

  it('is complete however long the run was', () => {
    const events: JournalEvent[] = [
      opened,
      { event: 'step-began', step: 1, kind: 'load-ramp' },
      { event: 'point-began', step: 1, point: 1, phase: 'ramp', set: { current: 1 } },
    ];
    for (let sample = 1; sample <= 2345; sample += 1) {
      events.push({ event: 'reading', step: 1, point: 1, sample, of: 'load', what: 'current', value: 1 });
    }
    const rows = rowsOf(recordOf(events));
    expect(rows).toHaveLength(2345);
    expect(rows.map((row) => row['sample'])).toEqual(rows.map((_, index) => `${index + 1}`));
  });

  it('can be made again, and leaves nothing else behind', () => {
    const folder = recordOf(shortRun);
    const first = rowsOf(folder);
    expect(rowsOf(folder)).toEqual(first);
    expect(readdirSync(folder.path).sort()).toEqual(['journal.jsonl', 'readings.csv']);
  });

  it('is not made from a journal that is not there, and says which', () => {
    const folder = makeRunFolder(place('runs'), new Date(0), 'K1', 'quick-look');
    expect(() => {
      writeReadingsCsv(folder);
    }).toThrow(
      expect.objectContaining({
        exitCode: 66,
        message: `${folder.journal} is no record: there is no such file or folder`,
      }),
    );
    expect(readdirSync(folder.path)).toEqual([]);
  });

  it.skipIf(!existsSync('/dev/full'))('names itself and the full disk, and leaves no half of a file', () => {
    const folder = recordOf(shortRun);
    symlinkSync('/dev/full', `${folder.readings}.new`);
    expect(() => {
      writeReadingsCsv(folder);
    }).toThrow(
      expect.objectContaining({
        code: 'RECORD_WRITE',
        exitCode: 74,
        message: `${folder.readings} can't be written: the disk is full`,
      }),
    );
    expect(readdirSync(folder.path)).toEqual(['journal.jsonl']);
  });
});
