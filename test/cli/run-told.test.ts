import { PassThrough } from 'node:stream';
import { expect, it } from 'vitest';
import { tell } from '../../src/cli/run-told.js';
import type { Streams } from '../../src/cli/streams.js';
import { RecordWriteError } from '../../src/record/record-error.js';
import { runFolderAt } from '../../src/record/run-folder.js';
import { understand } from '../../src/report/understand.js';

const kept = 'fixtures/runs/20261130T091500Z-K1-real-limit';

/** What is said of a run that came to its end, in a pipe. */
function toldOf(unkept: RecordWriteError | undefined): string {
  const [stdout, stderr] = [new PassThrough(), new PassThrough()];
  const streams = { stdout, stderr, environment: {} } as unknown as Streams;
  tell(
    {
      ...{ ending: { how: 'completed' }, safety: { kind: 'confirmed' }, sourceSafety: undefined, status: 0 },
      folder: runFolderAt(kept),
      understood: { kind: 'result', result: understand(kept), unkept },
    },
    [],
    { json: true, junitUnkept: undefined },
    streams,
  );
  return String(stderr.read());
}

it('a run that has ended names its record, and the page that lies in it', () => {
  expect(toldOf(undefined)).toContain(`record: ${kept}\nreport: report.html, in that folder\n`);
});

it('a page that could not be written is not named, and what is missing is', () => {
  const told = toldOf(new RecordWriteError(`${kept}/report.html`, new Error('the disk is full')));
  expect(told).toContain(`record: ${kept}\n`);
  expect(told).not.toContain('report: ');
  expect(told).toContain('the journal holds it all');
});
