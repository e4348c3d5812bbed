import { mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it, onTestFinished, vi } from 'vitest';
import { checkJournal, type Integrity } from '../../src/record/journal-check.js';
import { readJournal } from '../../src/record/journal-reader.js';
import type { TimedEvent } from '../../src/record/journal-event.js';
import { askLoad, journalOf, until } from './at-the-bench.js';
import { ended, railproof, start } from './railproof.js';
import { serve } from './served.js';
import { noSmallDisks, onSmallDisk } from './small-disk.js';

vi.setConfig({ testTimeout: 60_000 });

const folder = mkdtempSync(join(tmpdir(), 'railproof-full-'));

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

function procedure(name: string, step: string): string {
  const path = join(folder, `${name}.yaml`);
  writeFileSync(path, `railproof: procedure 1\nname: ${name}\ntitle: ${name}\nsteps:\n  - ${step}\n`);
  return path;
}
/** Three readings a sample; a point ends often enough for the test that waits for one. */
const million = procedure('million', 'load-ramp: { from: 0 A, to: 4 A, points: 2500, readings: 134 }');
const short = procedure('short', 'load-ramp: { from: 0 A, to: 4 A, points: 5 }');
const nursery = 'fixtures/benches/nursery.yaml';
const run = (procedure: string, runs: string, bench = nursery): readonly string[] => [
  ...['run', procedure, '--bench', bench, '--module', 'fixtures/modules/K1.yaml', '--yes', '--runs', runs],
];

/** The one record that a disk holds. */
function recordIn(kept: string): string {
  return join(kept, 'runs', readdirSync(join(kept, 'runs'))[0] ?? '');
}

function read(record: string): { readonly integrity: Integrity; readonly events: readonly TimedEvent[] } {
  const path = join(record, 'journal.jsonl');
  const events: TimedEvent[] = [];
  const integrity = readJournal(path, checkJournal(path), (event) => events.push(event));
  return { integrity, events };
}

const lastLine = (text: string): string => text.trimEnd().split('\n').at(-1) ?? '';
const off = 'The load is off; it was read back.';

describe.skipIf(noSmallDisks)('a disk that fills up in the middle of a million readings', () => {
  it('ends the run with the load off, status 74, and a whole journal that says so', async () => {
    const { status, stdout, stderr, kept } = await onSmallDisk(folder, 'size=512k', (disk) =>
      run(million, join(disk, 'runs')),
    );
    expect(stderr).toMatch(/journal\.jsonl can't be written: the disk is full\. .*make room/);
    expect(lastLine(stderr)).toBe(off);
    expect(status).toBe(74);
    const { integrity, events } = read(recordIn(kept));
    expect(integrity).toMatchObject({ kind: 'whole' });
    const readings = events.filter(({ event }) => event === 'reading').length;
    expect(readings).toBeGreaterThan(3000);
    expect(stdout).toContain(`${readings} readings; journal whole`);
    expect(events.slice(-2)).toMatchObject([
      { event: 'input', state: 'off', confirmed: true },
      { event: 'ended', how: 'failed', status: 74 },
    ]);
    const again = await railproof(['analyse', recordIn(kept)]);
    expect(again.stdout).toContain('the disk is full');
    expect(again.status).toBe(74);
  });

  it('leaves the load of a real line off, as the load itself says', async () => {
    const served = await serve(nursery, join(folder, 'served.yaml'), 'tcp');
    onTestFinished(() => served.close());
    const { status, stderr, kept } = await onSmallDisk(folder, 'size=40k', (disk) =>
      run(million, join(disk, 'runs'), served.bench),
    );
    expect(stderr).toContain("journal.jsonl can't be written: the disk is full");
    expect(lastLine(stderr)).toBe(off);
    expect(status).toBe(74);
    expect(await askLoad(served.bench)).toBe('0');
    const { integrity, events } = read(recordIn(kept));
    expect(integrity).toMatchObject({ kind: 'whole' });
    expect(events).toContainEqual(expect.objectContaining({ event: 'input', state: 'on', confirmed: true }));
  });
});

describe.skipIf(noSmallDisks)('a disk on which a record can not even be begun', () => {
  it.each([
    ['full', 'nr_inodes=1', /runs can't be written: the disk is full/],
    ['full after the folders', 'nr_inodes=3', /run\.json can't be written: the disk is full/],
    ['full after run.json', 'nr_inodes=4', /journal\.jsonl can't be written: the disk is full/],
    ['full after the journal', 'nr_inodes=5', /journal\.jsonl can't be written: the disk is full/],
    ['for reading only', 'ro', /runs can't be written: the file system is read-only/],
  ])('is %s: nothing is switched on, and it says why', async (_, options, words) => {
    const { status, stdout, stderr } = await onSmallDisk(folder, options, (disk) =>
      run(short, join(disk, 'runs')),
    );
    expect(stderr).toMatch(words);
    expect(stderr).not.toContain('step 1');
    expect(stdout).toBe('');
    expect(status).toBe(74);
  });
});

it.skipIf(noSmallDisks).each([
  ['the table', 'nr_inodes=6', /readings\.csv can't be written: the disk is full; the journal holds it all/],
  ['the report', 'nr_inodes=8', /report\.html can't be written: the disk is full; the journal holds it all/],
])(
  'a disk with no room for %s beside the journal fails nothing, and the user is told',
  async (_, options, words) => {
    const { status, stderr, kept } = await onSmallDisk(folder, options, (disk) =>
      run(short, join(disk, 'runs')),
    );
    expect(stderr).toMatch(words);
    expect(lastLine(stderr)).toBe(off);
    expect(status).toBe(0);
    expect(read(recordIn(kept)).integrity).toMatchObject({ kind: 'whole' });
  },
);

it('a file that may not grow beyond a limit of the shell is a disk that is full, and no sudden end', async () => {
  const runs = join(folder, 'runs-limited');
  const child = start(run(million, runs), { under: ['prlimit', '--fsize=100000'] });
  const { status, stderr } = await ended(child);
  expect(stderr).toContain("journal.jsonl can't be written: it is larger than a file may be here");
  expect(lastLine(stderr)).toBe(off);
  expect(status).toBe(74);
  expect(journalOf(runs)).toMatch(/\}\n$/);
});

it('folders of records that are removed in the middle of a run end it', async () => {
  const runs = join(folder, 'runs-removed');
  const child = start(run(million, runs));
  const end = ended(child);
  await until(() => journalOf(runs).includes('"phase":"ramp"'));
  rmSync(runs, { recursive: true });
  const { status, stderr } = await end;
  expect(stderr).toContain('journal.jsonl was removed while the run was writing to it');
  expect(lastLine(stderr)).toBe(off);
  expect(status).toBe(74);
});
