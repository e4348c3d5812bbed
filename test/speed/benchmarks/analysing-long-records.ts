import { createReadStream, statSync } from 'node:fs';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import type * as understanding from '../../../src/report/understand.js';
import { built } from '../built.js';
import type { Benchmark, Figure } from '../figure.js';
import { inWrittenRecord, longRecords, type LongRecord } from '../long-record/long-records.js';
import { median, secondsOf, timedSideBySide } from '../side-by-side.js';

const { understand } = await built<typeof understanding>('report/understand.js');

const wanted = 1_000_000;
const shorter = [10_000, 100_000];
const rounds = 5;

export default (async () => {
  const figures: Figure[] = [];
  for (const record of longRecords) figures.push(await analysed(record));
  return figures;
}) satisfies Benchmark;

/** From the file to the findings, seals and all, against a program that only parses the lines of the same file. */
async function analysed(record: LongRecord): Promise<Figure> {
  const { whose, write } = record;
  const grown: Record<string, number> = {};
  for (const count of shorter) grown[`µs per reading of ${count}`] = await microsecondsEach(record, count);
  return inWrittenRecord(write, wanted, async (run, readings) => {
    const journal = join(run, 'journal.jsonl');
    const { ours, rival, ratio } = await timedSideBySide({
      ours: () => understand(run).findings,
      rival: () => parsedInChunks(journal),
      rounds,
    });
    return {
      kind: 'measured',
      name: `analysing-1000000-readings-of-${whose.replaceAll(' ', '-')}`,
      what: `analysing 1,000,000 readings of ${whose}`,
      ours: { value: ours, unit: 's' },
      rival: { value: rival, unit: 's', what: 'JSON.parse of each line, split by hand' },
      ratio,
      bound: { atMost: 2 },
      beside: {
        readings,
        megabytes: statSync(journal).size / 1e6,
        'JSON.parse of each line of readline, s': await secondsOf(() => parsedByReadline(journal)),
        ...grown,
        [`µs per reading of ${wanted}`]: (ours / readings) * 1e6,
      },
    };
  });
}

function microsecondsEach({ write }: LongRecord, count: number): Promise<number> {
  return inWrittenRecord(write, count, async (run, readings) => {
    const taken: number[] = [];
    for (let round = 0; round < rounds; round += 1) taken.push(await secondsOf(() => understand(run)));
    return (median(taken) / readings) * 1e6;
  });
}

/** Chunks of a stream, cut at the ends of lines: what one writes who finds readline slow. */
async function parsedInChunks(path: string): Promise<number> {
  let lines = 0;
  let rest = '';
  for await (const chunk of createReadStream(path, { encoding: 'utf8' })) {
    const pieces = (rest + String(chunk)).split('\n');
    rest = pieces.pop() ?? '';
    for (const line of pieces) {
      if (typeof JSON.parse(line) === 'object') lines += 1;
    }
  }
  return lines;
}

async function parsedByReadline(path: string): Promise<number> {
  let lines = 0;
  for await (const line of createInterface({ input: createReadStream(path), crlfDelay: Infinity })) {
    if (typeof JSON.parse(line) === 'object') lines += 1;
  }
  return lines;
}
