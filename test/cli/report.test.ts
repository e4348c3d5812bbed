import {
  chmodSync,
  cpSync,
  existsSync,
  mkdirSync,
  mkdtempSync,
  readFileSync,
  rmSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { openFile, showFile } from '../../src/cli/open-file.js';
import type { Streams } from '../../src/cli/streams.js';
import { pageMark } from '../../src/report/page/page.js';
import { railproof } from './in-process.js';

const kept = 'fixtures/runs/20261130T091500Z-K1-real-limit';
let here: string;
let record: string;

beforeEach(() => {
  here = mkdtempSync(join(tmpdir(), 'railproof-report-'));
  record = join(here, 'K1 of today');
  cpSync(kept, record, { recursive: true });
});
afterEach(() => {
  rmSync(here, { recursive: true, force: true });
});

const read = (path: string): string => readFileSync(path, 'utf8');

describe('railproof report', () => {
  it('writes report.html into the folder of the record, says where, and ends as analyse does', async () => {
    const { status, stdout, stderr } = await railproof('report', record);
    const page = join(record, 'report.html');
    expect([status, stdout, stderr]).toEqual([0, `Report: ${page}\n`, '']);
    expect(read(page)).toContain(pageMark('report'));
    expect(read(page)).toContain('<h1>K1: What one module really delivers</h1>');
  });

  it('writes over an older report, and wherever it is told to', async () => {
    const to = join(here, 'K1.html');
    writeFileSync(to, `<!doctype html>${pageMark('report')} of last year`);
    expect((await railproof('report', record, '--to', to)).status).toBe(0);
    expect(read(to)).not.toContain('of last year');
    expect(existsSync(join(record, 'report.html'))).toBe(false);
  });

  it.each([
    ['a file of somebody else', 'notes.html', 'my notes', 64, /is no report, so it is not written over/],
    [
      'a page of another kind',
      'sheet.html',
      pageMark('build sheet'),
      64,
      /is no report, so it is not written/,
    ],
    ['a name that is none of a page', 'report.pdf', undefined, 64, /its name ends in \.html/],
    ['a folder that is not there', 'no/where.html', undefined, 74, /the report can't be written/],
  ])('leaves %s alone, and says so', async (_, name, text, expected, words) => {
    const to = join(here, name);
    if (text !== undefined) writeFileSync(to, text);
    const { status, stdout, stderr } = await railproof('report', record, '--to', to);
    expect([status, stdout]).toEqual([expected, '']);
    expect(stderr).toMatch(words);
    if (text === undefined) expect(existsSync(to)).toBe(false);
    else expect(read(to)).toBe(text);
  });

  it('says what is no record', async () => {
    const { status, stderr } = await railproof('report', here);
    expect(status).toBe(66);
    expect(stderr).toContain('is no record');
  });

  it('writes what is whole of a record that was cut off, ends undecided and says how to go on', async () => {
    const journal = join(record, 'journal.jsonl');
    const lines = read(journal).split('\n');
    const done = lines.findIndex((line) => line.includes('"event":"step-ended"'));
    writeFileSync(journal, lines.slice(0, done + 5).join('\n'));
    const { status, stderr } = await railproof('report', record);
    expect(status).toBe((await railproof('analyse', record)).status);
    expect(read(join(record, 'report.html'))).toContain('Cut off: this test was not finished');
    expect(stderr).toBe((await railproof('analyse', record)).stderr);
  });
});

// A program of that name on the path stands for what a desktop opens files with.
describe.skipIf(process.platform !== 'linux')('opening a page', () => {
  it('hands the page to the opener of the system, as one argument', async () => {
    const programs = opener(`printf '%s\\n' "$#" "$1" > ${JSON.stringify(join(here, 'opened'))}`);
    expect(await openFile(join(record, 'report.html'), programs)).toBeUndefined();
    expect(read(join(here, 'opened'))).toBe(`1\n${join(record, 'report.html')}\n`);
  });

  it('tells what went wrong, and is no reason to fail', async () => {
    expect(await openFile('report.html', opener('exit 3'))).toBe(
      'the page could not be opened: xdg-open gave up',
    );
    expect(await openFile('report.html', { PATH: here })).toBe(
      'the page could not be opened: there is no xdg-open here',
    );
    let said = '';
    const stderr = { write: (text: string) => (said += text) } as unknown as Streams['stderr'];
    await showFile('report.html', { stderr, environment: { PATH: here } });
    expect(said).toBe('the page could not be opened: there is no xdg-open here; open report.html by hand.\n');
  });

  function opener(script: string): NodeJS.ProcessEnv {
    const programs = join(here, 'programs');
    mkdirSync(programs);
    writeFileSync(join(programs, 'xdg-open'), `#!/bin/sh\n${script}\n`);
    chmodSync(join(programs, 'xdg-open'), 0o755);
    return { PATH: `${programs}:/usr/bin:/bin` };
  }
});
