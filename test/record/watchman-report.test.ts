import { execFileSync } from 'node:child_process';
import { mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, expect, it } from 'vitest';
import { readWatchmanReport } from '../../src/record/read-watchman-report.js';
import { runFolderAt } from '../../src/record/run-folder.js';
import { type WatchmanReport, writeWatchmanReport } from '../../src/record/watchman-report.js';

const folder = runFolderAt(mkdtempSync(join(tmpdir(), 'railproof-report-')));
const report: WatchmanReport = {
  format: 'railproof/watchman 1',
  noticed: '2026-11-30T09:15:07.300Z',
  why: 'runner-vanished',
  address: 'tcp://127.0.0.1:5025',
  attempts: 2,
  outcome: 'unconfirmed',
  reason: 'nothing listens there',
  took: 0.314,
};

afterAll(() => {
  rmSync(folder.path, { recursive: true });
});

it("a watchman's report is read as it was written, and nothing is left beside it", () => {
  writeWatchmanReport(folder, report);
  expect(readWatchmanReport(folder)).toEqual(report);
  expect(readdirSync(folder.path)).toEqual(['watchman.json']);
});

it.each([
  ['none', undefined],
  ['a torn one', JSON.stringify(report).slice(0, -9)],
  ['one of a later format', JSON.stringify({ ...report, format: 'railproof/watchman 2' })],
  ['one that does not say how it went', JSON.stringify({ ...report, outcome: 'maybe' })],
  ['one that took less than no time', JSON.stringify({ ...report, took: -1 })],
  ['one without end', JSON.stringify({ ...report, reason: 'x'.repeat(1 << 20) })],
  ['a list', '[]'],
])('%s is believed to say nothing', (_, text) => {
  rmSync(folder.watchman, { force: true });
  if (text !== undefined) writeFileSync(folder.watchman, text);
  expect(readWatchmanReport(folder)).toBeUndefined();
});

it('a pipe in its place is not waited for', () => {
  rmSync(folder.watchman, { force: true });
  execFileSync('mkfifo', [folder.watchman]);
  expect(readWatchmanReport(folder)).toBeUndefined();
});
