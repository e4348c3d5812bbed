import { cpSync, mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { readDrawer, readRecords } from '../../src/cli/read-records.js';
import { NoRunsError } from '../../src/cli/record-names.js';
import { NoRecordError } from '../../src/record/record-error.js';

const kept = 'fixtures/runs';
const limit = '20261130T091500Z-K1-real-limit';
const bonded = '20261202T034355Z-K2-isolation';
let folder: string;

beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'railproof-drawer-'));
});

afterEach(() => {
  rmSync(folder, { recursive: true, force: true });
});

function copyOf(run: string, as = run): string {
  const path = join(folder, as);
  cpSync(join(kept, run), path, { recursive: true });
  return path;
}

describe('the records that were named', () => {
  it('are read in their order, with what they found and what they did not conform to', () => {
    const records = readRecords([join(kept, bonded), join(kept, limit)]);
    expect(records.map(({ run, state }) => [run, state])).toEqual([
      [bonded, 'whole'],
      [limit, 'whole'],
    ]);
    expect(records[0]?.unmet).toEqual([{ finding: 'earth-relation', requirement: 'is isolated' }]);
    expect(records[1]?.unmet).toEqual([]);
    expect(records[1]?.findings.find(({ name }) => name === 'usable-current')?.value).toBeCloseTo(5.06, 1);
  });

  it('count once, however they were named', () => {
    const names = [join(kept, limit), `${kept}/../runs/${limit}/`, join(kept, bonded)];
    expect(readRecords(names).map(({ run }) => run)).toEqual([limit, bonded]);
  });

  it('are refused where one is none', () => {
    expect(() => readRecords([join(kept, limit), folder])).toThrow(NoRecordError);
    expect(() => readRecords([join(folder, 'nowhere')])).toThrow(NoRecordError);
  });

  it('say that they break off, or that a seal does not hold', () => {
    const journal = (path: string): string => join(path, 'journal.jsonl');
    const cut = copyOf(limit);
    const lines = readFileSync(journal(cut), 'utf8').trimEnd().split('\n');
    writeFileSync(journal(cut), `${lines.slice(0, -1).join('\n')}\n`);
    const edited = copyOf(bonded);
    writeFileSync(journal(edited), readFileSync(journal(edited), 'utf8').replace('"value":0.', '"value":1.'));
    expect(readRecords([cut, edited]).map(({ state }) => state)).toEqual(['cut-off', 'damaged']);
  });
});

describe('a drawer', () => {
  it('is all records that a folder holds, or the one that it is, each once', () => {
    const all = readdirSync(kept).sort();
    expect(readDrawer([kept]).records.map(({ run }) => run)).toEqual(all);
    expect(readDrawer([join(kept, bonded), kept]).records.map(({ run }) => run)).toEqual([
      bonded,
      ...all.filter((run) => run !== bonded),
    ]);
  });

  it('names what can not be read, and goes on', () => {
    copyOf(bonded);
    writeFileSync(join(copyOf(limit, 'broken'), 'run.json'), '{');
    mkdirSync(join(folder, 'empty'));
    const { records, unreadable } = readDrawer([folder]);
    expect(records.map(({ run }) => run)).toEqual([bonded]);
    expect(unreadable).toEqual([{ run: 'broken', why: expect.stringContaining('it is not JSON') as string }]);
  });

  it('is refused where there is no such folder', () => {
    expect(() => readDrawer([join(folder, 'nowhere')])).toThrow(NoRunsError);
  });
});
