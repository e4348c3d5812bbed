import { writeFileSync } from 'node:fs';
import { plainDecimal } from '../quantity/decimal-text.js';
import { csvText, textCell } from './csv.js';
import type { PointBegan, PointEnded, ReadingTaken, TimedEvent } from './journal-event.js';
import { checkJournal } from './journal-check.js';
import { readJournal } from './journal-reader.js';
import { replaceFileBy, type RunFolder } from './run-folder.js';

const columns = [
  'time (s)',
  'step',
  'step kind',
  'point',
  'phase',
  'point outcome',
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

type Row = Partial<Record<(typeof columns)[number], string>>;

/**
 * So few that they are written before the next collection of garbage finds them: what it finds it takes for lasting, and
 * of a record of millions of readings that is more memory than all else.
 */
const batchSize = 64;

/**
 * Writes readings.csv (RFC 4180, units in the header) from the journal: one row for each sample, which
 * is all that was read at one moment; what was read elsewhere than at the usual place stands before it, in a
 * row for each place. Empty cells were not read, or the instrument had no value. Of a point that was interrupted
 * the outcome says so: it was taken again, and its rows count for nothing; one that was broken off has none.
 * Of the journal only a batch of rows, and the outcome of each point, is ever in memory.
 * @throws RecordWriteError, NoRecordError
 */
export function writeReadingsCsv(folder: RunFolder): void {
  replaceFileBy(folder.readings, (file) => {
    let batch: Row[] = [];
    const write = (header: boolean): void => {
      writeFileSync(file, csvText(columns, batch, { header }));
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

/** A point as it stands in the table: what it was begun for, and what it came to. */
interface PointOfTable extends Pick<PointBegan, 'step' | 'point' | 'phase' | 'set'> {
  readonly kind: string;
  readonly outcome: PointEnded['outcome'] | '';
}

function eachSample(journal: string, visit: (row: Row) => void): void {
  const integrity = checkJournal(journal);
  const read = (see: (event: TimedEvent) => void): void => {
    readJournal(journal, integrity, see);
  };
  // What a point came to stands behind its readings.
  const outcomes = outcomesOf(read);
  let kind = '';
  let begun = 0;
  let point: PointOfTable | undefined;
  let row: Row | undefined;
  let sample: number | undefined;
  const finish = (): void => {
    if (row !== undefined) visit(row);
    row = undefined;
  };
  read((event) => {
    if (event.event === 'step-began') kind = event.kind;
    if (event.event === 'point-began') {
      finish();
      const { step, point: number, phase, set } = event;
      point = { step, point: number, phase, set, kind, outcome: outcomes[begun] ?? '' };
      begun += 1;
    }
    if (event.event !== 'reading' || point === undefined) return;
    if (event.at !== undefined) {
      visit(rowElsewhere(event, point));
      return;
    }
    if (row === undefined || sample !== event.sample) {
      finish();
      sample = event.sample;
      row = rowOf(event.t, point, sample);
    }
    const column = columnOf[`${event.of} ${event.what}`];
    if (column !== undefined && event.value !== null) row[column] = plainDecimal(event.value);
  });
  finish();
}

/** Of each point, in the order in which they were begun; empty where none is told. */
function outcomesOf(read: (see: (event: TimedEvent) => void) => void): readonly PointOfTable['outcome'][] {
  const outcomes: PointOfTable['outcome'][] = [];
  read((event) => {
    if (event.event === 'point-began') outcomes.push('');
    if (event.event === 'point-ended' && outcomes.length > 0) outcomes[outcomes.length - 1] = event.outcome;
  });
  return outcomes;
}

/** A reading with the probes not at their usual place has a row of its own, which says where they were. */
function rowElsewhere(reading: ReadingTaken & Pick<TimedEvent, 't'>, point: PointOfTable): Row {
  const { t, sample, at = '', what, value } = reading;
  const column = what === 'resistance' ? 'resistance (Ohm)' : 'voltage elsewhere (V)';
  return {
    ...rowOf(t, point, sample),
    'probes at': textCell(at),
    ...(value === null ? {} : { [column]: plainDecimal(value) }),
  };
}

function rowOf(t: number, { step, kind, point, phase, outcome, set }: PointOfTable, sample: number): Row {
  return {
    'time (s)': plainDecimal(t),
    step: String(step),
    'step kind': textCell(kind),
    point: String(point),
    phase,
    'point outcome': outcome,
    sample: String(sample),
    'set current (A)': set.current === undefined ? '' : plainDecimal(set.current),
    'set voltage (V)': set.voltage === undefined ? '' : plainDecimal(set.voltage),
  };
}
