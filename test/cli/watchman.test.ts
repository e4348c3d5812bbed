import { existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { loadPlan } from '../../src/cli/load-plan.js';
import { performPlan } from '../../src/cli/perform-plan.js';
import { simulatedOperator } from '../../src/cli/simulated-operator.js';
import { worldOf } from '../../src/cli/wiring.js';
import { NoWatchmanError, Watchman } from '../../src/cli/watchman.js';
import { startWatchmanProcess } from '../../src/cli/watchman-process.js';
import { nursery } from '../bench/nursery-bench.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-no-watchman-'));
const { description, drivers } = await nursery();
const bench = {
  ...description,
  instruments: {
    load: { driver: 'load-input-scpi', connection: { kind: 'tcp', host: '127.0.0.1', port: 1 } as const },
  },
};
const order = { folder, bench, driver: drivers.load };

afterAll(() => {
  rmSync(folder, { recursive: true });
});

/** A watchman whose program is another one. */
function watchmanThat(does: string, name: string): Watchman {
  const entry = join(folder, `${name}.mjs`);
  writeFileSync(entry, does);
  return new Watchman(() => startWatchmanProcess(entry));
}

describe('a watchman that can not be had', () => {
  it.each([
    ['ends at once', 'process.exit(7)', 'it ended with status 7'],
    ['is ended by the system', 'process.kill(process.pid, "SIGKILL")', 'it was ended by SIGKILL'],
  ])(
    'because it %s is reported before anything is switched on, as a run that is stopped',
    async (name, does, why) => {
      const watchman = watchmanThat(does, name.replaceAll(' ', '-'));
      await watchman.take(order, () => undefined);
      expect(watchman.missing.aborted).toBe(true);
      const reason: unknown = watchman.missing.reason;
      if (!(reason instanceof NoWatchmanError)) throw new Error('it is not said why');
      expect(reason.message).toContain(why);
      expect(reason.exitCode).toBe(3);
      await watchman.dismiss();
    },
  );

  it('is replaced by another one though the journal can not be told', async () => {
    // The first one ends once it has said that it is ready; those after it stay.
    const first = JSON.stringify(join(folder, 'first'));
    const watchman = watchmanThat(
      `import { existsSync, writeFileSync } from 'node:fs';
       process.stdin.on('data', () => {
         process.stdout.write('ready\\n', () => {
           if (existsSync(${first})) return;
           writeFileSync(${first}, '');
           process.exit(9);
         });
       });
       process.stdin.on('end', () => process.exit(0));`,
      'replaced',
    );
    const told = new Promise<string>((resolve) => {
      void watchman.take(order, (text) => {
        resolve(text);
        throw new Error('the disk is full');
      });
    });
    expect(await told).toContain('it ended with status 9');
    expect(watchman.missing.aborted).toBe(false);
    await watchman.dismiss();
  });

  it('ends a run before its first step, with nothing switched on and a record that says why', async () => {
    const loaded = await loadPlan({
      procedure: 'quick-look',
      bench: 'fixtures/benches/nursery.yaml',
      modules: ['fixtures/modules/K1.yaml'],
    });
    const world = await worldOf(loaded.plan.bench, loaded.plan.drivers);
    if (world.simulation === undefined) throw new Error('the bench is not simulated');
    const performed = await performPlan(
      loaded,
      { ...world, startWatchman: () => watchmanThat('process.exit(7)', 'gone') },
      {
        runs: join(folder, 'runs'),
        operator: simulatedOperator(world.simulation),
        signal: new AbortController().signal,
        hurry: new AbortController().signal,
        watch: {
          stepBegan: () => undefined,
          progress: () => undefined,
          recorded: () => undefined,
          noticed: () => undefined,
        },
      },
    );
    expect(performed.ending).toMatchObject({ how: 'stopped', error: { code: 'NO_WATCHMAN' } });
    expect(performed.status).toBe(3);
    const journal = readFileSync(performed.folder.journal, 'utf8');
    expect(journal).toMatch(/"event":"ended","how":"stopped","reason":"the watchman/);
    expect(journal).not.toMatch(/step-began|"state":"on"/);
  });
});

describe('a watchman that is there', () => {
  it('watches, hears what becomes of the input, and goes when it is dismissed', async () => {
    const watchman = new Watchman();
    const notices: string[] = [];
    await watchman.take(order, (text) => notices.push(text));
    watchman.input('on', false);
    watchman.input('off', true);
    await watchman.dismiss();
    expect(watchman.missing.aborted).toBe(false);
    expect(notices).toEqual([]);
    expect(existsSync(join(folder, 'watchman.json'))).toBe(false);
  });

  it('goes also when it never got an order', async () => {
    const watchman = new Watchman();
    await watchman.dismiss();
    expect(watchman.missing.aborted).toBe(false);
  });
});
