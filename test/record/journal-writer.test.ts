import { spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { type JournalEvent, sealedEvents } from '../../src/record/journal-event.js';
import { JournalWriter } from '../../src/record/journal-writer.js';
import { RecordWriteError } from '../../src/record/record-error.js';
import fc from '../property.js';
import { anyEvent, opened, readBack, shortRun, temporaryFolder, writeJournal } from './some-run.js';

const place = temporaryFolder();
let made = 0;
const fresh = (): string => place(`journal-${(made += 1)}.jsonl`);

describe('a journal that is written', () => {
  it('reads back as it was appended, one event a line', () => {
    const path = fresh();
    const written = writeJournal(path, shortRun);
    expect(readBack(path)).toEqual({
      events: written,
      integrity: { kind: 'whole', lines: shortRun.length, bytes: readFileSync(path).length },
    });
    expect(readFileSync(path, 'utf8').split('\n')).toHaveLength(shortRun.length + 1);
  });

  it('reads back whatever its texts and numbers are', () => {
    fc.assert(
      fc.property(fc.array(anyEvent, { maxLength: 30 }), (events) => {
        const path = fresh();
        const written = writeJournal(path, [
          opened,
          ...events,
          { event: 'ended', how: 'completed', reason: null, status: 0 },
        ]);
        const { events: read, integrity } = readBack(path);
        // Through JSON, as -0 is written as 0 there.
        expect(read).toEqual(JSON.parse(JSON.stringify(written)));
        expect(integrity.kind).toBe('whole');
      }),
      { numRuns: 100 },
    );
  });

  it('counts seconds from its beginning, to the microsecond', () => {
    const path = fresh();
    let now = 5000;
    const writer = new JournalWriter(path, () => now);
    now = 5000 + 1 / 3;
    writer.append({ event: 'notice', text: 'a third of a second later' });
    writer.close();
    expect(JSON.parse(readFileSync(path, 'utf8'))).toMatchObject({ t: 0.333333 });
  });

  it('is sealed at each point, each change of the input, a guard and the end, and nowhere else', () => {
    const path = fresh();
    writeJournal(path, shortRun);
    const lines = readFileSync(path, 'utf8').trimEnd().split('\n');
    expect(lines.map((line) => /,"seal":"[0-9a-f]{64}"}$/.test(line))).toEqual(
      shortRun.map(({ event }) => sealedEvents.has(event)),
    );
  });

  it('never goes on in a file that is there already', () => {
    const path = fresh();
    writeFileSync(path, 'the record of another run\n');
    expect(() => new JournalWriter(path, () => 0)).toThrow(
      expect.objectContaining({
        exitCode: 74,
        message: `${path} can't be written: something of that name is there already`,
      }),
    );
    expect(readFileSync(path, 'utf8')).toBe('the record of another run\n');
  });

  it('says where it was to be written when there is no such folder', () => {
    const path = place('nowhere/journal.jsonl');
    expect(() => new JournalWriter(path, () => 0)).toThrow(
      expect.objectContaining({
        code: 'RECORD_WRITE',
        path,
        advice: 'choose another folder with --runs, or make room there',
      }),
    );
  });
});

const canLimit = spawnSync('prlimit', ['--version']).status === 0;

/** From now on no file of this process may be larger: where a disk is full, writing stops in mid-line too. */
function limitFiles(bytes: number | 'unlimited'): void {
  const { status, stderr } = spawnSync('prlimit', ['--pid', `${process.pid}`, `--fsize=${bytes}:`]);
  if (status !== 0) throw new Error(String(stderr));
}

describe.skipIf(!canLimit && process.env['CI'] === undefined)('a journal that runs out of room', () => {
  it('fails with the name of the file, and what was torn is taken back so that the end still stands', () => {
    const path = fresh();
    const writer = new JournalWriter(path, () => 0);
    writer.append(opened);
    limitFiles(1000);
    let failed: unknown;
    let written = 1;
    try {
      for (; written < 100; written += 1) writer.append({ event: 'notice', text: 'the pumps are running' });
    } catch (error) {
      failed = error;
    }
    const still = (): void => {
      writer.append({ event: 'ended', how: 'failed', reason: 'no room', status: 69 });
    };
    expect(still).toThrow(RecordWriteError);
    limitFiles('unlimited');
    expect(failed).toMatchObject({
      code: 'RECORD_WRITE',
      exitCode: 74,
      message: `${path} can't be written: it is larger than a file may be here`,
    });
    expect(readBack(path).integrity).toMatchObject({ kind: 'cut-off', lines: written, tornBytes: 0 });

    still();
    writer.close();
    expect(readBack(path).integrity).toMatchObject({ kind: 'whole', lines: written + 1 });
  });
});

describe('a journal whose disk fails', () => {
  const brokenOnce = () => {
    let flushes = 0;
    return (): void => {
      flushes += 1;
      if (flushes === 2) throw Object.assign(new Error('EIO'), { code: 'EIO' });
    };
  };
  const off: JournalEvent = { event: 'input', state: 'off', confirmed: true };

  it('takes nothing more, for the next flush may succeed and mean nothing', () => {
    const path = fresh();
    const writer = new JournalWriter(path, () => 0, brokenOnce());
    writer.append(opened);
    writer.append({ event: 'notice', text: 'the pumps are running' });
    const failure = expect.objectContaining({
      exitCode: 74,
      message: `${path} can't be written: the disk reports an error`,
    }) as unknown;
    for (const event of [off, off, opened, { event: 'notice', text: 'still here' }] as const) {
      expect(() => {
        writer.append(event);
      }).toThrow(failure);
    }
    writer.close();
    expect(readBack(path)).toMatchObject({
      integrity: { kind: 'cut-off', lines: 2, tornBytes: 0 },
      events: [{ event: 'opened' }, { event: 'notice' }],
    });
  });
});

it.each([
  ['the file', (path: string) => path],
  ['the folder it is in', dirname],
])('a journal says at the next sealed line that %s was removed', (_, removed) => {
  const folder = place(`removed-${(made += 1)}`);
  mkdirSync(folder);
  const path = join(folder, 'journal.jsonl');
  const writer = new JournalWriter(path, () => 0);
  writer.append(opened);
  rmSync(removed(path), { recursive: true });
  writer.append({ event: 'notice', text: 'the pumps are running' });
  for (const event of [opened, { event: 'notice', text: 'still here' }] as const) {
    expect(() => {
      writer.append(event);
    }).toThrow(
      expect.objectContaining({
        code: 'RECORD_GONE',
        exitCode: 74,
        message: `${path} was removed while the run was writing to it: what was read is lost`,
      }),
    );
  }
  writer.close();
});

it('a closed journal takes nothing more', () => {
  const path = fresh();
  const writer = new JournalWriter(path, () => 0);
  writer.append(opened);
  writer.close();
  expect(() => {
    writer.append(opened);
  }).toThrow(RecordWriteError);
  expect(existsSync(path)).toBe(true);
  expect(readBack(path).integrity).toMatchObject({ kind: 'cut-off', lines: 1 });
});
