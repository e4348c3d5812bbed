import { join } from 'node:path';
import type * as journalCheck from '../../../src/record/journal-check.js';
import type * as journalReader from '../../../src/record/journal-reader.js';
import type * as runPages from '../../../src/report/run-page/run-page.js';
import type * as understanding from '../../../src/report/understand.js';
import { built } from '../built.js';
import type { Benchmark, Figure } from '../figure.js';
import { inWrittenRecord, longRecords, type LongRecord } from '../long-record/long-records.js';
import { median, secondsOf, timedSideBySide } from '../side-by-side.js';

const { checkJournal } = await built<typeof journalCheck>('record/journal-check.js');
const { readJournal } = await built<typeof journalReader>('record/journal-reader.js');
const { runPage } = await built<typeof runPages>('report/run-page/run-page.js');
const { understand } = await built<typeof understanding>('report/understand.js');

const wanted = 100_000;
const made = { program: 'railproof', date: new Date(0) };

export default (async () => {
  const figures: Figure[] = [];
  for (const record of longRecords) figures.push(await reported(record));
  return figures;
}) satisfies Benchmark;

/** From the file to the page, against what it takes to have its events one by one, with every check. */
function reported({ whose, write }: LongRecord): Promise<Figure> {
  return inWrittenRecord(write, wanted, async (run, readings) => {
    const journal = join(run, 'journal.jsonl');
    const { ours, rival, ratio } = await timedSideBySide({
      ours: () => runPage(understand(run), made),
      rival: () => eventsOf(journal),
      rounds: 15,
      unmeasured: 2,
    });
    const pages = [];
    for (let time = 0; time < 5; time += 1) {
      const result = understand(run);
      pages.push(await secondsOf(() => runPage(result, made)));
    }
    return {
      kind: 'measured',
      name: `reporting-100000-readings-of-${whose.replaceAll(' ', '-')}`,
      what: `report of 100,000 readings of ${whose}`,
      ours: { value: ours * 1000, unit: 'ms' },
      rival: { value: rival * 1000, unit: 'ms', what: 'reading the record' },
      ratio,
      bound: { atMost: 3 },
      beside: {
        readings,
        'of it the page alone, ms': median(pages) * 1000,
        'characters of the page': runPage(understand(run), made).length,
      },
    };
  });
}

function eventsOf(journal: string): number {
  let events = 0;
  readJournal(journal, checkJournal(journal), () => {
    events += 1;
  });
  return events;
}
