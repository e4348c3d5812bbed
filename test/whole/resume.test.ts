import {
  copyFileSync,
  cpSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  truncateSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import { basename, join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { loadResumed } from '../../src/cli/resume-plan.js';
import type { Result } from '../../src/report/result.js';
import fc from '../property.js';
import { railproof as inProcess } from '../cli/in-process.js';
import {
  differences,
  eventsOf,
  eventsOfSteps,
  fingerprint,
  performUntil,
  resultOf,
  resume,
} from './broken-off.js';
import { ended, start } from './railproof.js';
import { serve } from './served.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-resume-'));
const runs = join(folder, 'runs');

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

const upTo = (last: number): readonly number[] => Array.from({ length: last }, (_, index) => index + 1);

/** What must hold of a record that goes on with another, whatever was measured. */
function expectWhole(result: Result, record: string, earlier: string, done: number): void {
  expect(result.integrity.kind).toBe('whole');
  expect(result.evidence.ended).toMatchObject({ how: 'completed' });
  expect(result.evidence.steps.map(({ step }) => step)).toEqual(upTo(result.header.steps.length));
  expect(result.evidence.resumed.at(-1)).toMatchObject({ run: basename(earlier), steps: done });
  expect(eventsOfSteps(record, upTo(done))).toEqual(eventsOfSteps(earlier, upTo(done)));
  const times = eventsOf(record).map(({ t }) => t);
  expect(times).toEqual([...times].sort((one, other) => one - other));
}

describe('a run of the real limit that was stopped', { timeout: 60_000 }, () => {
  let undisturbed: Result;

  beforeAll(async () => {
    undisturbed = resultOf(await performUntil({ procedure: 'real-limit' }, runs));
  });

  it.each([1, 2, 3, 4])('after step %i goes on to the same findings', async (done) => {
    const broken = await performUntil({ procedure: 'real-limit' }, runs, done + 1);
    expect(broken.ending.how).toBe('stopped');
    const before = fingerprint(broken.folder.path);
    const performed = await resume(broken.folder.path, runs);
    const result = resultOf(performed);
    expect(performed.safety).toEqual({ kind: 'confirmed' });
    expectWhole(result, performed.folder.path, broken.folder.path, done);
    expect(differences(result, undisturbed)).toEqual([]);
    expect(result.decisions.map(({ finding, outcome }) => [finding, outcome])).toEqual(
      undisturbed.decisions.map(({ finding, outcome }) => [finding, outcome]),
    );
    expect(result.outcome).toBe('conforms');
    expect(fingerprint(broken.folder.path)).toBe(before);
  });

  it('twice is resumed twice, and the record says which steps come from where', async () => {
    const first = (await performUntil({ procedure: 'real-limit' }, runs, 3)).folder.path;
    const second = (await resume(first, runs, 4)).folder.path;
    const third = await resume(second, runs);
    const result = resultOf(third);
    expectWhole(result, third.folder.path, second, 3);
    expect(eventsOfSteps(third.folder.path, [1, 2])).toEqual(eventsOfSteps(first, [1, 2]));
    expect(differences(result, undisturbed)).toEqual([]);
    const { stdout } = await inProcess('analyse', third.folder.path);
    expect(stdout).toMatch(
      new RegExp(
        `\nsteps 1 to 2 taken over from ${basename(first)}, \\d{4}-\\d\\d-\\d\\d \\d\\d:\\d\\d UTC\n` +
          `step 3 taken over from ${basename(second)}, `,
      ),
    );
    const json = JSON.parse((await inProcess('analyse', third.folder.path, '--json')).stdout) as object;
    expect(json).toMatchObject({
      takenOver: [
        { run: basename(first), firstStep: 1, lastStep: 2 },
        { run: basename(second), firstStep: 3, lastStep: 3 },
      ],
    });
  });

  it('is judged against the baseline that it was begun with, which need not be there any more', async () => {
    const baseline = join(folder, 'baseline');
    cpSync('fixtures/runs/20261130T091500Z-K1-real-limit', baseline, { recursive: true });
    const broken = await performUntil({ procedure: 'real-limit', baseline }, runs, 3);
    rmSync(baseline, { recursive: true });
    const result = resultOf(await resume(broken.folder.path, runs));
    expect(result.header.baseline).toEqual(resultOf(broken).header.baseline);
    expect(result.header.baseline?.run).toBe('baseline');
    expect(result.decisions.length).toBeGreaterThan(undisturbed.decisions.length);
  });

  it('but stopped again at once loses nothing that was taken over', async () => {
    const first = (await performUntil({ procedure: 'real-limit' }, runs, 4)).folder.path;
    const second = (await resume(first, runs, 4)).folder.path;
    const third = await resume(second, runs);
    expectWhole(resultOf(third), third.folder.path, second, 3);
    expect(eventsOfSteps(third.folder.path, [1, 2, 3])).toEqual(eventsOfSteps(first, [1, 2, 3]));
  });
});

describe('what a finished check of the isolation has shown', { timeout: 60_000 }, () => {
  const stacking = { procedure: 'stacking', bench: 'stack', modules: ['K1', 'K2', 'K3'] };
  let stacked: Result;

  beforeAll(async () => {
    stacked = resultOf(await performUntil(stacking, runs));
  });

  it('still holds for an acceptance that goes on', async () => {
    const wanted = { procedure: 'acceptance', bench: 'nursery-isolation' };
    const undisturbed = resultOf(await performUntil(wanted, runs));
    const broken = await performUntil(wanted, runs, 3);
    const performed = await resume(broken.folder.path, runs);
    expectWhole(resultOf(performed), performed.folder.path, broken.folder.path, 2);
    expect(differences(resultOf(performed), undisturbed)).toEqual([]);
    expect(resultOf(performed).decisions.map(({ outcome }) => outcome)).not.toContain('undecided');
  });

  it.each([1, 4])('lets a stack that was stopped after step %i be worked', async (done) => {
    const broken = await performUntil(stacking, runs, done + 1);
    const performed = await resume(broken.folder.path, runs);
    expectWhole(resultOf(performed), performed.folder.path, broken.folder.path, done);
    expect(differences(resultOf(performed), stacked)).toEqual([]);
  });

  it('is told with what hands were asked for, for whoever makes the bench ready again', async () => {
    const broken = await performUntil(stacking, runs, 4);
    const { resumed } = await loadResumed({ run: broken.folder.path, bench: undefined });
    expect(resumed.from.standing[0]).toMatch(
      /goes on with step 4: bench, leads and module are as step 3 left them/,
    );
    expect(resumed.from.standing).toContainEqual(
      expect.stringMatching(/^Step 2 asked for this last: All unplugged, wire the stack/),
    );
  });
});

describe('a journal that was cut off', () => {
  it(
    'at any byte goes on after the last step that ended before it, or is refused',
    { timeout: 120_000 },
    async () => {
      const whole = (await performUntil({ procedure: 'quick-look' }, runs)).folder.path;
      const journal = readFileSync(join(whole, 'journal.jsonl'));
      const steps = eventsOf(whole).filter(({ event }) => event === 'step-ended').length;
      let made = 0;
      await fc.assert(
        fc.asyncProperty(fc.integer({ min: 0, max: journal.length - 1 }), async (cut) => {
          const torn = join(folder, 'torn', `cut-${(made += 1)}`);
          mkdirSync(torn, { recursive: true });
          copyFileSync(join(whole, 'run.json'), join(torn, 'run.json'));
          copyFileSync(join(whole, 'journal.jsonl'), join(torn, 'journal.jsonl'));
          truncateSync(join(torn, 'journal.jsonl'), cut);
          const before = fingerprint(torn);
          const done = eventsOf(torn).filter(({ event }) => event === 'step-ended').length;
          if (done === 0) {
            await expect(resume(torn, runs)).rejects.toMatchObject({ code: 'NOT_RESUMABLE', exitCode: 65 });
            return;
          }
          const performed = await resume(torn, runs);
          const result = resultOf(performed);
          expect(done).toBeLessThanOrEqual(steps);
          expectWhole(result, performed.folder.path, torn, done);
          expect(fingerprint(torn)).toBe(before);
        }),
        { numRuns: 25 },
      );
    },
  );
});

describe('a run that was killed', () => {
  it('goes on in a new process, at another address', { timeout: 60_000 }, async () => {
    const brisk = join(folder, 'brisk.yaml');
    writeFileSync(
      brisk,
      'railproof: procedure 1\nname: brisk\ntitle: Brisk\nsteps:\n  - open-circuit: { for: 500 ms }\n  - load-ramp: { from: 1 A, to: 3 A, points: 20, dwell: 50 ms, readings: 2 }\n  - open-circuit: { for: 500 ms }\n',
    );
    const into = join(folder, 'killed');
    const first = await serve('fixtures/benches/nursery.yaml', join(folder, 'first.yaml'), 'tcp');
    const child = start([
      ...['run', brisk, '--bench', first.bench, '--module', 'fixtures/modules/K1.yaml'],
      ...['--runs', into, '--yes'],
    ]);
    const end = ended(child);
    const record = await inStep(into, 2);
    child.kill('SIGKILL');
    await end;
    await first.close();
    // What became of the files meanwhile does not matter.
    rmSync(brisk);
    const second = await serve('fixtures/benches/nursery.yaml', join(folder, 'second.yaml'), 'tcp');
    try {
      const before = fingerprint(record);
      const resumed = await ended(start(['run', '--resume', record, '--bench', second.bench, '--yes']));
      expect(resumed.stderr).toContain(`Resuming ${record}\n  begun `);
      expect(resumed.stderr).toMatch(
        /, cut off\n {2}done: step 1 of 3: open-circuit, .*\n {2}goes on with step 2 of 3: load-ramp/,
      );
      expect(resumed.stderr).toMatch(/goes on with step 2: bench, leads and module are as step 1 left them/);
      expect(resumed.stderr).toMatch(/\nstep 2 of 3: load-ramp, /);
      expect(resumed.stderr).not.toMatch(/\nstep 1 of 3/);
      expect(resumed.stderr.trimEnd().split('\n').at(-1)).toBe('The load is off; it was read back.');
      expect(resumed.stdout).toMatch(/step 1 taken over from /);
      expect(resumed.stdout).toContain('journal whole, every seal holds');
      expect(resumed.status).toBe(0);
      expect(readdirSync(into)).toHaveLength(2);
      expect(fingerprint(record)).toBe(before);
      const later = readdirSync(into).find((name) => name !== basename(record)) ?? '';
      const both = await ended(start(['compare', record, join(into, later)]));
      expect(both.stdout + both.stderr).toContain('THE SAME READINGS: step 1 of both records');
    } finally {
      await second.close();
    }
  });
});

/** The record, as soon as its journal tells of that step's first point. */
async function inStep(into: string, step: number): Promise<string> {
  for (;;) {
    try {
      const record = join(into, readdirSync(into)[0] ?? '');
      if (
        new RegExp(`"event":"point-began","step":${step},"point":2`).test(
          readFileSync(join(record, 'journal.jsonl'), 'utf8'),
        )
      )
        return record;
    } catch {
      // Not there yet.
    }
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
}
