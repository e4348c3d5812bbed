import { createReadStream, mkdirSync, mkdtempSync, rmSync, statSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import type * as understanding from '../../../src/report/understand.js';
import { built } from '../built.js';
import type { Benchmark, Figure } from '../figure.js';
import { writeGroupRun } from '../long-record/group-run.js';
import { writeModuleRun } from '../long-record/module-run.js';
import { median, secondsOf, timedSideBySide } from '../side-by-side.js';

const { understand } = await built<typeof understanding>('report/understand.js');

const wanted = 1_000_000;
const shorter = [10_000, 100_000];
const rounds = 5;

export default (async () => [
  await analysed('module', writeModuleRun),
  await analysed('group-of-two', writeGroupRun),
]) satisfies Benchmark;

/** From the file to the findings, seals and all, against a program that only reads the lines of the same file. */
async function analysed(whose: string, write: (folder: string, readings: number) => number): Promise<Figure> {
  const folder = mkdtempSync(join(tmpdir(), 'railproof-speed-'));
  try {
    const { run, readings } = written(folder, wanted, write);
    const journal = join(run, 'journal.jsonl');
    const { ours, rival, ratio } = await timedSideBySide({
      ours: () => understand(run).findings,
      rival: () => parsedInChunks(journal),
      rounds,
    });
    const byReadline = median([
      await secondsOf(() => parsedByReadline(journal)),
      await secondsOf(() => parsedByReadline(journal)),
    ]);
    const grown: Record<string, number> = {};
    for (const count of shorter) {
      const short = written(folder, count, write);
      const taken = [];
      for (let time = 0; time < rounds; time += 1) taken.push(await secondsOf(() => understand(short.run)));
      grown[`µs per reading of ${count}`] = (median(taken) / short.readings) * 1e6;
    }
    return {
      kind: 'measured',
      name: `analysing-a-million-readings-of-a-${whose}`,
      what: `analysing 1,000,000 readings of a ${whose.replaceAll('-', ' ')}`,
      ours: { value: ours, unit: 's' },
      rival: { value: rival, unit: 's', what: 'JSON.parse of each line, split by hand' },
      ratio,
      bound: { atMost: 2 },
      beside: {
        readings,
        megabytes: statSync(journal).size / 1e6,
        'JSON.parse of each line of readline, s': byReadline,
        ...grown,
        [`µs per reading of ${wanted}`]: (ours / readings) * 1e6,
      },
    };
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

function written(folder: string, count: number, write: (folder: string, readings: number) => number) {
  const run = join(folder, String(count));
  mkdirSync(run);
  return { run, readings: write(run, count) };
}

/** Chunks of a stream, cut at the ends of lines: what one writes who finds readline slow. */
async function parsedInChunks(path: string): Promise<number> {
  let lines = 0;
  let rest = '';
  for await (const chunk of createReadStream(path, { encoding: 'utf8' })) {
    const pieces = (rest + (chunk as string)).split('\n');
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
