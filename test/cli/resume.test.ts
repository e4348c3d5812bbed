import { createHash } from 'node:crypto';
import { mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { packageFacts } from '../../src/cli/package-facts.js';
import type { TimedEvent } from '../../src/record/journal-event.js';
import { JournalWriter } from '../../src/record/journal-writer.js';
import { runFolderAt, writeHeader } from '../../src/record/run-folder.js';
import { readHeader, type RunHeader } from '../../src/record/run-header.js';
import { eventsOf, performUntil } from '../whole/broken-off.js';
import { railproof } from './in-process.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-resume-cli-'));
const runs = join(folder, 'runs');
/** Of quick-look one step is done. */
let broken: string;
let completed: string;
let made = 0;

beforeAll(async () => {
  broken = (await performUntil({ procedure: 'quick-look' }, runs, 2)).folder.path;
  completed = (await performUntil({ procedure: 'quick-look' }, runs)).folder.path;
});

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

/** The record of a run that was broken off, as another program might have made it: every seal holds. */
function otherwise(
  change: (header: RunHeader) => RunHeader,
  each: (event: TimedEvent) => TimedEvent = (event) => event,
): string {
  const path = join(folder, `made-elsewhere-${(made += 1)}`);
  mkdirSync(path);
  const header = writeHeader(runFolderAt(path), change(readHeader(broken).header));
  const journal = new JournalWriter(join(path, 'journal.jsonl'), () => 0);
  for (const event of eventsOf(broken)) {
    journal.copy(each(event.event === 'opened' ? { ...event, header } : event));
  }
  journal.close();
  return path;
}

/** The texts of one kind of input file, changed; the hash is that of the text again, where it is told so. */
function withText(kind: string, from: string, to: string, hashed: boolean): (header: RunHeader) => RunHeader {
  return (header) => ({
    ...header,
    files: header.files.map((file) => {
      if (file.kind !== kind) return file;
      const text = file.text.replace(from, to);
      expect(text).not.toBe(file.text);
      return {
        ...file,
        text,
        sha256: hashed ? createHash('sha256').update(text).digest('hex') : file.sha256,
      };
    }),
  });
}

function onlyRunIn(runs: string): string {
  return join(runs, readdirSync(runs)[0] ?? '');
}

function noticesIn(runs: string): readonly string[] {
  return eventsOf(onlyRunIn(runs)).flatMap((event) => (event.event === 'notice' ? [event.text] : []));
}

function benchWith(from: string | RegExp, to: string): string {
  const path = join(folder, `bench-${(made += 1)}.yaml`);
  const text = readFileSync('fixtures/benches/nursery.yaml', 'utf8');
  expect(text.replace(from, to)).not.toBe(text);
  writeFileSync(path, text.replace(from, to));
  return path;
}

describe('railproof run --resume', () => {
  it('goes on beside the earlier record, after showing what was done', async () => {
    const { status, stdout, stderr } = await railproof('run', '--resume', broken, '--json');
    expect(stderr).toMatch(
      /^Resuming .*K1-quick-look\n {2}begun \d{4}-\d\d-\d\d \d\d:\d\d UTC, stopped: somebody needs the bench\n {2}done: step 1 of \d: /,
    );
    expect(stderr).toMatch(/\n {2}goes on with step 2 of \d: /);
    expect(JSON.parse(stdout)).toMatchObject({
      ended: 'completed',
      takenOver: [{ run: broken.split('/').at(-1), firstStep: 1, lastStep: 1 }],
    });
    expect(readdirSync(runs)).toHaveLength(3);
    expect(status).toBe(0);
    const listed = await railproof('runs', runs);
    expect(listed.stdout.match(/ {2}goes on with .*K1-quick-look$/gm)).toEqual([
      `  goes on with ${broken.split('/').at(-1) ?? ''}`,
    ]);
  });

  it('--dry-run shows what is done and what is left, and makes no record', async () => {
    const before = readdirSync(runs);
    const { status, stdout, stderr } = await railproof('run', '--resume', broken, '--dry-run');
    expect(stderr).toContain('  done: step 1 of ');
    expect(stdout).toMatch(/\n {2}1 {2}\S+ +done {2}\S.*\n {2}2 {2}\S+ +about \d/);
    const json = await railproof('run', '--resume', broken, '--dry-run', '--json');
    const plan = JSON.parse(json.stdout) as { steps: { done: boolean; seconds: number }[]; seconds: number };
    expect(plan.steps.map(({ done }) => done)).toEqual(plan.steps.map((_, index) => index === 0));
    expect(plan.seconds).toBe(plan.steps.slice(1).reduce((sum, { seconds }) => sum + seconds, 0));
    expect(readdirSync(runs)).toEqual(before);
    expect(status).toBe(0);
  });

  it('takes a bench at another address', async () => {
    const bench = benchWith("'simulated:'", "'simulated:standard-load'");
    const { status, stdout } = await railproof('run', '--resume', broken, '--bench', bench, '--dry-run');
    expect(stdout).toContain('done');
    expect(status).toBe(0);
  });

  it.each([
    ['a limit', 'current: 8 A', 'current: 9 A', 'limits.current was 8 and is 9'],
    [
      'the place where the voltage is read',
      'meter-at-module',
      'load-terminals',
      'voltage-from was "meter-at-module" and is "load-terminals"',
    ],
    [
      'a driver',
      'load-input-scpi',
      'load-short-scpi',
      'instruments.load.driver was "load-input-scpi" and is "load-short-scpi"',
    ],
    ['what is simulated there', 'seed: 7', 'seed: 8', 'simulation.seed was 7 and is 8'],
  ])('refuses a bench when %s changed', async (_what, from, to, words) => {
    const bench = benchWith(from, to);
    const { status, stderr } = await railproof('run', '--resume', broken, '--bench', bench);
    expect(stderr).toBe(
      `${bench} is not the bench of the record: ${words}. Only the connections may be others now; on another bench, run it afresh.\n`,
    );
    expect(status).toBe(65);
  });

  it('says that a run was completed, and that there is no record', async () => {
    const whole = await railproof('run', '--resume', completed);
    expect(whole.stderr).toContain(
      `${completed} can't be resumed: the run was completed, there is nothing to continue`,
    );
    expect(whole.status).toBe(65);
    expect((await railproof('run', '--resume', join(folder, 'nowhere'))).status).toBe(66);
  });

  it('refuses a record whose files are not those that were read then', async () => {
    const record = otherwise(withText('module', 'name: K1', 'name: K2', false));
    const { status, stderr } = await railproof('run', '--resume', record);
    expect(stderr).toMatch(
      /run\.json: the text of fixtures\/modules\/K1\.yaml is not the one that was read then/,
    );
    expect(status).toBe(65);
  });

  it('names the place in the record where this version does not take a file', async () => {
    const record = otherwise(withText('procedure', 'open-circuit:', 'open-circus:', true));
    const { status, stderr } = await railproof('run', '--resume', record);
    expect(stderr).toMatch(
      /run\.json: procedures\/quick-look\.yaml:\d+:\d+: steps\.0: no step is called 'open-circus'/,
    );
    expect(status).toBe(65);
  });

  it('refuses a record whose steps this version understands otherwise', async () => {
    const record = otherwise((header) => ({
      ...header,
      steps: header.steps.map((step) => ({ ...step, settings: { ...step.settings, readings: 99 } })),
    }));
    const { status, stderr } = await railproof('run', '--resume', record);
    expect(stderr).toContain('this version makes other steps of its procedure than railproof');
    expect(status).toBe(65);
  });

  it('refuses what a step carries in words that nobody knows', async () => {
    const record = otherwise(
      (header) => header,
      (event) =>
        event.event === 'step-ended'
          ? { ...event, carried: { known: {}, tried: {}, earths: { K1: 'float\u001bing' } } }
          : event,
    );
    const { status, stderr } = await railproof('run', '--resume', record);
    expect(stderr).toContain('journal.jsonl: no output stands to earth as "float\\u001bing"');
    expect(status).toBe(65);
  });

  it('says in the journal and on the screen that another version did the first steps', async () => {
    const record = otherwise((header) => ({ ...header, program: { name: 'railproof', version: '0.0.1' } }));
    const into = join(folder, 'versions');
    const { status, stderr } = await railproof('run', '--resume', record, '--runs', into);
    const words = `step 1 was done with railproof 0.0.1; this is railproof ${packageFacts().version}`;
    expect(stderr).toContain(`  ${words}\n`);
    expect(noticesIn(into)).toContain(words);
    expect(status).toBe(0);
  });

  it('says in the journal and on the screen that another instrument measured the first steps', async () => {
    const record = otherwise((header) => ({
      ...header,
      instruments: header.instruments.map((instrument) =>
        instrument.role === 'meter' ? { ...instrument, identity: 'NURSERY,METER,2,1' } : instrument,
      ),
    }));
    const into = join(folder, 'instruments');
    const { status, stderr } = await railproof('run', '--resume', record, '--runs', into);
    const words =
      'step 1 was done with another meter, NURSERY,METER,2,1; now it is railproof,simulated meter,K-bench,1';
    expect(stderr).toContain(`  ${words}\n`);
    expect(noticesIn(into).filter((text) => text.includes('another'))).toEqual([words]);
    expect(status).toBe(0);
  });

  it('works the module by the nameplate of its file, whatever a record carries for one', async () => {
    const record = otherwise(
      (header) => header,
      (event) =>
        event.event === 'step-ended' && event.carried !== undefined
          ? { ...event, carried: { ...event.carried, known: { ...event.carried.known, 'rated-current': 6 } } }
          : event,
    );
    const into = join(folder, 'nameplate');
    expect((await railproof('run', '--resume', record, '--runs', into)).status).toBe(0);
    const currents = eventsOf(onlyRunIn(into)).flatMap((event) =>
      event.event === 'point-began' ? [event.set.current ?? 0] : [],
    );
    expect(Math.max(...currents)).toBe(4);
  });

  it('is what a run that failed is said to go on with, before the last words', async () => {
    const bench = benchWith(/$/, '  faults: [{ at: 8 s, what: meter-silent }]\n');
    const into = join(folder, 'failed');
    const failed = await railproof(
      ...['run', 'quick-look', '--bench', bench, '--module', 'fixtures/modules/K1.yaml', '--runs', into],
    );
    expect(failed.stderr.trimEnd().split('\n').slice(-2)).toEqual([
      `\`railproof run --resume ${onlyRunIn(into)}\` goes on with step 2.`,
      'The load is off; it was read back.',
    ]);
    expect(failed.status).toBe(69);
    const analysed = await railproof('analyse', broken);
    expect(analysed.stderr).toBe(`\`railproof run --resume ${broken}\` goes on with step 2.\n`);
    expect((await railproof('analyse', completed)).stderr).toBe('');
  });
});

describe('railproof run', () => {
  it.each([
    [[], '<procedure>, --bench <file> and --module <file> are missing'],
    [['real-limit'], '--bench <file> and --module <file> are missing'],
    [['real-limit', '--bench', 'fixtures/benches/nursery.yaml'], '--module <file> is missing'],
  ])('with %j says what is missing', async (words, missing) => {
    const { status, stderr } = await railproof('run', ...words);
    expect(stderr).toBe(
      `railproof run: ${missing}. \`railproof help run\` shows an example; \`railproof run --resume <run>\` goes on with a run that was broken off.\n`,
    );
    expect(status).toBe(64);
  });

  it('does not resume and begin at once', async () => {
    const { status, stderr } = await railproof(
      ...[
        'run',
        'real-limit',
        '--resume',
        broken,
        '--module',
        'fixtures/modules/K1.yaml',
        '--tolerance',
        'unchanged',
      ],
    );
    expect(stderr).toMatch(
      /^railproof run: --resume and <procedure>, --module and --tolerance do not go together\. /,
    );
    expect(status).toBe(64);
  });
});
