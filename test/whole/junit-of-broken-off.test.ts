import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, expect, it, vi } from 'vitest';
import { counted, readJunit, type SuiteRead } from '../report/junit/read-junit.js';
import { journalOf, until } from './at-the-bench.js';
import { ended, start } from './railproof.js';
import { serve, type Served } from './served.js';

vi.setConfig({ testTimeout: 60_000 });

const folder = mkdtempSync(join(tmpdir(), 'railproof-junit-of-'));

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

function suiteIn(file: string): SuiteRead {
  const { counts, suites } = readJunit(readFileSync(file, 'utf8'));
  expect(counts).toEqual(counted(suites));
  const [suite] = suites;
  if (suite === undefined) throw new Error('no suite');
  return suite;
}

const shortly = ({ cases }: SuiteRead): readonly string[] =>
  cases.map(({ name, came, type = '', message = '' }) => `${name}: ${came} ${type}: ${message}`);

/** A run on a bench in real time, which is broken off once the load is on; what its report held until then, and after it. */
async function brokenOff(
  name: string,
  breakOff: (run: ReturnType<typeof start>, bench: Served) => Promise<void> | void,
): Promise<{ readonly status: number | null; readonly meanwhile: SuiteRead; readonly after: SuiteRead }> {
  const bench = await serve('fixtures/benches/nursery.yaml', join(folder, `${name}.yaml`), 'tcp');
  try {
    const [runs, file] = [join(folder, name), join(folder, `${name}.xml`)];
    const run = start(
      ['run', 'real-limit', '--bench', bench.bench, '--module', 'fixtures/modules/K1.yaml', '--yes'].concat([
        '--runs',
        runs,
        '--junit',
        file,
      ]),
    );
    const end = ended(run);
    await until(() => journalOf(runs).includes('"state":"on"'));
    const meanwhile = suiteIn(file);
    await breakOff(run, bench);
    return { status: (await end).status, meanwhile, after: suiteIn(file) };
  } finally {
    await bench.close();
  }
}

const undecided =
  /^usable-current at least 4 A .*: failure undecided: required: at least 4 A .*; was not measured$/;

it('a run that is stopped with Ctrl-C has not passed: its report is an error while it goes on, and says so after it', async () => {
  const { status, meanwhile, after } = await brokenOff('stopped', (run) => {
    run.kill('SIGINT');
  });
  expect(status).toBe(3);
  expect(shortly(meanwhile)).toEqual([
    'the run: error not-ended: the run has not ended, or ended without a word',
  ]);
  expect(shortly(after)).toEqual([
    'the run: error stopped: the run was stopped: stopped with Ctrl-C',
    expect.stringMatching(undecided),
  ]);
});

it('a run whose instruments vanish is an error, and so is its load, which nobody could read back', async () => {
  const { status, after } = await brokenOff('gone', (_run, bench) => bench.close());
  expect(status).toBe(69);
  expect(shortly(after)).toEqual([
    expect.stringMatching(/^the run: error failed: the run failed: tcp:/),
    expect.stringMatching(/^the load: error not-confirmed-off: THE LOAD MAY BE ON/),
    expect.stringMatching(undecided),
  ]);
});
