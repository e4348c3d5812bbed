import { writeFileSync } from 'node:fs';
import { stringify } from 'csv-stringify/sync';
import type { PointBegan, ReadingTaken, TimedEvent } from './journal-event.js';
import { checkJournal, readJournal } from './journal-reader.js';
import { replaceFileBy, type RunFolder } from './run-folder.js';

const columns = [
  'time (s)',
  'step',
  'step kind',
  'point',
  'phase',
  'sample',
  'set current (A)',
  'set voltage (V)',
  'meter voltage (V)',
  'load voltage (V)',
  'load current (A)',
  'temperature (°C)',
  'voltage elsewhere (V)',
  'resistance (Ohm)',
  'probes at',
] as const;

const columnOf: Readonly<Record<string, (typeof columns)[number]>> = {
  'meter voltage': 'meter voltage (V)',
  'load voltage': 'load voltage (V)',
  'load current': 'load current (A)',
  'thermometer temperature': 'temperature (°C)',
  'meter resistance': 'resistance (Ohm)',
  'meter temperature': 'temperature (°C)',
  'load temperature': 'temperature (°C)',
};

type Row = Partial<Record<(typeof columns)[number], string | number>>;

const batchSize = 500;

/**
 * Writes readings.csv (RFC 4180, units in the header) from the journal: one row for each sample, which
 * is all that was read at one moment; what was read elsewhere than at the usual place stands before it, in a
 * row for each place. Empty cells were not read, or the instrument had no value.
 * Only a batch of rows is ever in memory.
 * @throws RecordWriteError, NoRecordError
 */
export function writeReadingsCsv(folder: RunFolder): void {
  replaceFileBy(folder.readings, (file) => {
    let batch: Row[] = [];
    const write = (header: boolean): void => {
      writeFileSync(file, stringify(batch, { header, columns: [...columns], record_delimiter: 'windows' }));
      batch = [];
    };
    write(true);
    eachSample(folder.journal, (row) => {
      batch.push(row);
      if (batch.length === batchSize) write(false);
    });
    write(false);
  });
}

function eachSample(journal: string, visit: (row: Row) => void): void {
  let kind = '';
  let point: PointBegan | undefined;
  let row: Row | undefined;
  const finish = (): void => {
    if (row !== undefined) visit(row);
    row = undefined;
  };
  readJournal(journal, checkJournal(journal), (event) => {
    if (event.event === 'step-began') kind = event.kind;
    if (event.event === 'point-began') {
      finish();
      point = event;
    }
    if (event.event !== 'reading' || point === undefined) return;
    if (event.at !== undefined) {
      visit(rowElsewhere(event, kind, point));
      return;
    }
    if (row?.sample !== event.sample) {
      finish();
      row = rowOf(event.t, kind, point, event.sample);
    }
    const column = columnOf[`${event.of} ${event.what}`];
    if (column !== undefined && event.value !== null) row[column] = event.value;
  });
  finish();
}

/** A reading with the probes not at their usual place has a row of its own, which says where they were. */
function rowElsewhere(reading: ReadingTaken & Pick<TimedEvent, 't'>, kind: string, point: PointBegan): Row {
  const { t, sample, at = '', what, value } = reading;
  const column = what === 'resistance' ? 'resistance (Ohm)' : 'voltage elsewhere (V)';
  return {
    ...rowOf(t, kind, point, sample),
    'probes at': asText(at),
    ...(value === null ? {} : { [column]: value }),
  };
}

/**
 * A text as a cell that no spreadsheet takes for a formula. Ours begin with a letter, but part of the journal
 * may have been copied from a record of somebody else's.
 */
function asText(text: string): string {
  return /^[=+\-@\t\r]/.test(text) ? `'${text}` : text;
}

function rowOf(t: number, kind: string, point: PointBegan, sample: number): Row {
  return {
    'time (s)': t,
    step: point.step,
    'step kind': asText(kind),
    point: point.point,
    phase: point.phase,
    sample,
    'set current (A)': point.set.current ?? '',
    'set voltage (V)': point.set.voltage ?? '',
  };
}
