import {
  cpSync,
  existsSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  symlinkSync,
  truncateSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, afterEach, beforeEach, describe, expect, it } from 'vitest';
import { junitOfRun } from '../../src/cli/junit-of-run.js';
import { placeForJunit } from '../../src/cli/junit-written.js';
import type { PlanPerformed } from '../../src/cli/perform-plan.js';
import { unfinishedSuite } from '../../src/report/junit/unfinished-suite.js';
import type { Plan } from '../../src/run/plan.js';
import { counted, readJunit, type SuiteRead } from '../report/junit/read-junit.js';
import { resultOf } from '../report/fixed-record.js';
import { railproof } from './in-process.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-junit-'));
const kept = 'fixtures/runs/20261130T091500Z-K1-real-limit';
const other = 'fixtures/runs/20261202T034336Z-K2-real-limit';
let file = '';
let count = 0;

beforeEach(() => {
  count += 1;
  mkdirSync(join(folder, `${count}`));
  file = join(folder, `${count}`, 'junit.xml');
});

afterEach(() => {
  // Whatever happened, nothing half written is left beside it.
  expect(readdirSync(join(file, '..')).filter((name) => name.endsWith('.part'))).toEqual([]);
});

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

function suiteIn(path: string): SuiteRead {
  const { counts, suites } = readJunit(readFileSync(path, 'utf8'));
  expect(counts).toEqual(counted(suites));
  const [suite, ...more] = suites;
  if (suite === undefined || more.length > 0) throw new Error(`${suites.length} suites`);
  return suite;
}

const shortly = ({ cases }: SuiteRead): readonly string[] =>
  cases.map(({ name, came, type = '' }) => `${name.split(' ')[0]}: ${came} ${type}`.trim());

const nursery = readFileSync('fixtures/benches/nursery.yaml', 'utf8');

function benchOf(text: string): string {
  const path = join(file, '..', 'bench.yaml');
  writeFileSync(path, text);
  return path;
}

function run(bench: string, ...more: readonly string[]): ReturnType<typeof railproof> {
  const words = ['--module', 'fixtures/modules/K1.yaml', '--runs', join(folder, 'runs'), '--junit', file];
  return railproof('run', 'quick-look', '--bench', bench, ...words, ...more);
}

describe('--junit of run', () => {
  it('keeps what was decided, and ends with the same status as without', async () => {
    const { status } = await run('fixtures/benches/nursery.yaml');
    expect(status).toBe(0);
    expect(shortly(suiteIn(file))).toEqual(['usable-current: passed']);
  });

  it('fails of a module that is not good for its label, and the status is 1', async () => {
    const weak = nursery.replace('current: 5.3 A', 'current: 3.3 A').replace('5.1 A', '3.1 A');
    expect(weak).toContain('current: 3.3 A');
    const { status } = await run(benchOf(weak));
    expect(status).toBe(1);
    expect(shortly(suiteIn(file))).toEqual(['usable-current: failure does-not-conform']);
  });

  it('is an error of a run that a guard stopped, and the status is 3', async () => {
    const { status } = await run(benchOf(nursery.replace('voltage: 60 V', 'voltage: 15.1 V')));
    const suite = suiteIn(file);
    expect(status).toBe(3);
    expect(shortly(suite)).toEqual(['the: error stopped', 'usable-current: failure undecided']);
    expect(suite.cases[0]?.message).toMatch(/^the run was stopped: .*15\.1 V/);
  });

  it('is an error of a run that could not begin, and says why', async () => {
    const nobody = nursery
      .replaceAll("'simulated:'", "'tcp://127.0.0.1:1'")
      .replace(/\nsimulation:.*/s, '\n');
    const { status } = await run(benchOf(nobody), '--yes');
    const suite = suiteIn(file);
    expect(status).toBe(69);
    expect(shortly(suite)).toEqual(['the: error not-begun']);
    expect(suite.cases[0]?.message).toContain('nothing listens on this port');
    expect(suite.cases[0]?.group).toBe('K1.quick-look');
  });

  it('leaves no report of an earlier run where a file of the next is wrong', async () => {
    await run('fixtures/benches/nursery.yaml');
    const { status } = await run(join(folder, 'no-such-bench.yaml'));
    expect(status).toBe(66);
    expect(existsSync(file)).toBe(false);
  });

  it('does not go with --dry-run, which has nothing to judge', async () => {
    const { status, stderr } = await run('fixtures/benches/nursery.yaml', '--dry-run');
    expect(status).toBe(64);
    expect(stderr).toContain('--junit and --dry-run do not go together');
    expect(existsSync(file)).toBe(false);
  });

  it('energises nothing where the place can not be written, and the status is 74', async () => {
    const words = ['--module', 'fixtures/modules/K1.yaml', '--runs', join(folder, 'none')];
    const { status, stderr } = await railproof(
      ...['run', 'quick-look', '--bench', 'fixtures/benches/nursery.yaml', ...words],
      ...['--junit', join(folder, 'no-such-folder', 'junit.xml')],
    );
    expect(status).toBe(74);
    expect(stderr).toContain("the JUnit report can't be written: there is no such file or folder.");
    expect(existsSync(join(folder, 'none'))).toBe(false);
  });
});

const plan = { procedure: { name: 'quick-look' }, underTest: { name: 'K1' } } as unknown as Plan;
const now = (): Date => new Date('2026-12-01T08:30:00Z');

function performed(understood: PlanPerformed['understood']): PlanPerformed {
  return { folder: { name: '20261201T083000Z-K1-real-limit' }, understood } as unknown as PlanPerformed;
}

describe('the JUnit report of a run', () => {
  it('is an error from before the run until after it, so that a run that vanishes has not passed', async () => {
    const junit = await junitOfRun(await placeForJunit(file), plan, now);
    expect(shortly(suiteIn(file))).toEqual(['the: error not-ended']);
    await junit.end(performed({ kind: 'result', result: resultOf(), unkept: undefined }));
    expect(shortly(suiteIn(file))).toContain('usable-current: passed');
  });

  it('is an error where the record can not be read afterwards', async () => {
    const junit = await junitOfRun(await placeForJunit(file), plan, now);
    await junit.end(performed({ kind: 'error', error: new Error('run.json is gone') }));
    const { name, cases } = suiteIn(file);
    expect(name).toBe('20261201T083000Z-K1-real-limit');
    expect(cases).toMatchObject([{ came: 'error', type: 'not-read', message: 'run.json is gone' }]);
  });

  it('that can not be written any more is told, and hides nothing else', async () => {
    const junit = await junitOfRun(await placeForJunit(file), plan, now);
    rmSync(join(file, '..'), { recursive: true });
    await junit.notBegun(new Error('why it did not begin'));
    const unkept = await junit.end(performed({ kind: 'result', result: resultOf(), unkept: undefined }));
    expect(unkept).toMatchObject({ code: 'JUNIT_NOT_KEPT', exitCode: 74 });
    mkdirSync(join(file, '..'));
  });
});

describe('--junit of analyse', () => {
  it('keeps the decisions of a record, one case each', async () => {
    const { status, stdout } = await railproof('analyse', kept, '--json', '--junit', file);
    const { decisions } = JSON.parse(stdout) as {
      readonly decisions: readonly { readonly finding: string; readonly requirement: string }[];
    };
    expect(status).toBe(0);
    expect(decisions).not.toHaveLength(0);
    expect(suiteIn(file).cases.map(({ name, came }) => [name, came])).toEqual(
      decisions.map(({ finding, requirement }) => [`${finding} ${requirement}`, 'passed']),
    );
  });

  it('keeps what is wrong with a record that --strict refuses', async () => {
    const torn = join(file, '..', 'torn');
    cpSync(kept, torn, { recursive: true });
    truncateSync(join(torn, 'journal.jsonl'), 20_000);
    const { status } = await railproof('analyse', torn, '--strict', '--junit', file);
    expect(status).toBe(65);
    expect(shortly(suiteIn(file))[0]).toBe('the: error cut-off');
  });

  it('leaves none where there is no record', async () => {
    await railproof('analyse', kept, '--junit', file);
    const { status } = await railproof('analyse', join(folder, 'nothing'), '--junit', file);
    expect(status).toBe(66);
    expect(existsSync(file)).toBe(false);
  });
});

describe('--junit of compare', () => {
  it('has a case for each finding that may not have changed', async () => {
    const { status } = await railproof('compare', kept, kept, '--junit', file);
    const suite = suiteIn(file);
    expect(status).toBe(0);
    expect(suite.counts).toMatchObject({ failures: 0, errors: 0 });
    expect(suite.cases.filter(({ came }) => came === 'passed').length).toBeGreaterThan(3);
  });

  it('has not passed where nobody can tell what changed, and the status is 2', async () => {
    const { status } = await railproof('compare', kept, other, '--junit', file);
    const suite = suiteIn(file);
    expect(status).toBe(2);
    expect(suite.cases.filter(({ type }) => type === 'undecided')).not.toEqual([]);
    expect(suite.properties).toContainEqual(['same-modules', 'false']);
  });
});

describe('a place for a JUnit report', () => {
  const suite = unfinishedSuite({ name: 'a run', procedure: 'p', modules: 'K1' }, 'not-begun', 'no', now());

  const takenBy: Readonly<Record<string, () => void>> = {
    'a file of another kind': () => {
      writeFileSync(file, '<testsuites name="other"/>');
    },
    'a folder': () => {
      mkdirSync(file);
    },
    'a link to a device': () => {
      symlinkSync('/dev/zero', file);
    },
  };

  it.each(Object.entries(takenBy))('is not where %s is, which is left as it is', async (_what, make) => {
    make();
    const { status, stderr } = await railproof('analyse', kept, '--junit', file);
    expect(status).toBe(64);
    expect(stderr).toContain('is there already and is no JUnit report');
    expect(readdirSync(join(file, '..'))).toEqual(['junit.xml']);
  });

  it('has a name that ends as XML does', async () => {
    const { status, stderr } = await railproof('analyse', kept, '--junit', join(file, '..', 'junit.txt'));
    expect(status).toBe(64);
    expect(stderr).toContain('its name ends in .xml');
  });

  it('is looked at again before it is written: what somebody put there meanwhile is theirs', async () => {
    const keep = await placeForJunit(file);
    writeFileSync(file, 'a letter');
    await expect(keep(() => suite)).rejects.toMatchObject({ code: 'JUNIT_NOT_KEPT', exitCode: 64 });
    expect(readFileSync(file, 'utf8')).toBe('a letter');
  });

  it('has the older report taken away at once, and the new one whole', async () => {
    await (
      await placeForJunit(file)
    )(() => suite);
    const keep = await placeForJunit(file);
    expect(existsSync(file)).toBe(false);
    await keep(() => suite);
    expect(suiteIn(file).cases).toHaveLength(1);
  });

  it('is none where none is wanted, and nothing is worked out for it', async () => {
    const keep = await placeForJunit(undefined);
    await keep(() => expect.fail('worked out'));
    expect(existsSync(file)).toBe(false);
  });
});
