import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it, onTestFinished, vi } from 'vitest';
import { findingNamed } from '../../src/analysis/finding.js';
import { loadPlan } from '../../src/cli/load-plan.js';
import { performPlan } from '../../src/cli/perform-plan.js';
import { simulatedOperator } from '../../src/cli/simulated-operator.js';
import { planDrivers, readBenchDrivers } from '../../src/cli/bench-drivers.js';
import { worldOf } from '../../src/cli/wiring.js';
import { realClock } from '../../src/clock/real-clock.js';
import { withAddresses } from '../../src/files/live-bench.js';
import { readBench } from '../../src/files/read-bench.js';
import type { Result } from '../../src/report/result.js';
import type { OpenedSimulation } from '../../src/simulation/open-simulation.js';
import { serveBench } from '../../src/simulation/serve.js';
import { sourceAtRest } from '../../src/simulation/virtual-source.js';
import type { Operator } from '../../src/steps/operator.js';
import { askLoad, askSource, journalOf, until } from './at-the-bench.js';
import { ended, railproof, root, start } from './railproof.js';
import { nobodyWatches } from './run-quietly.js';
import { serve } from './served.js';

vi.setConfig({ testTimeout: 90_000 });

const folder = mkdtempSync(join(tmpdir(), 'railproof-source-'));
afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

const shipped = readFileSync(join(root, 'fixtures/benches/nursery-source.yaml'), 'utf8');
const module = 'fixtures/modules/K7.yaml';
let count = 0;

/** The bench that comes with the project, changed; its file. */
function benchFile(change: (text: string) => string): string {
  count += 1;
  const path = join(folder, `bench-${count}.yaml`);
  writeFileSync(path, change(shipped));
  return path;
}

function procedureFile(name: string, ...steps: readonly string[]): string {
  const path = join(folder, `${name}.yaml`);
  const lines = steps.map((step) => `  - ${step}\n`).join('');
  writeFileSync(path, `railproof: procedure 1\nname: ${name}\ntitle: ${name}\nsteps:\n${lines}`);
  return path;
}

describe('a latching module that a source feeds, on a simulated bench', () => {
  /** Takes note of what is told; has no hands. */
  const handless: Operator = {
    present: false,
    acknowledge: () => Promise.resolve('--yes'),
    ask: () => Promise.reject(new Error('nobody is here')),
  };

  async function shown(
    bench: string,
    modules: string,
    operatorAt: (simulation: OpenedSimulation) => Operator,
  ) {
    const loaded = await loadPlan({ procedure: 'real-limit', bench, modules: [modules] });
    const world = await worldOf(loaded.plan.bench, loaded.plan.drivers);
    if (world.simulation === undefined) throw new Error('the bench is not simulated');
    const performed = await performPlan(loaded, world, {
      runs: join(folder, `runs-${(count += 1)}`),
      operator: operatorAt(world.simulation),
      signal: new AbortController().signal,
      hurry: new AbortController().signal,
      watch: nobodyWatches,
    });
    if (performed.understood.kind === 'error') throw performed.understood.error;
    const { world: truth, began } = world.simulation;
    return { ...performed, result: performed.understood.result, truth, at: world.clock.now() - began };
  }

  function inInterval({ findings }: Result, name: string, truth: number): boolean {
    const [low, high] = findingNamed(findings, name)?.interval ?? [];
    return low !== undefined && high !== undefined && low <= truth && truth <= high;
  }

  it('is gone through to the end with no hands, and both load and source are off then', async () => {
    // It does not warm here, so its limit is where it was.
    const bench = benchFile((text) => text.replace(/^ +thermal:.*\n/m, ''));
    const { ending, result, status, truth, at } = await shown(bench, module, () => handless);
    expect(ending).toEqual({ how: 'completed' });
    expect(status).toBe(0);
    expect(truth.load.input).toBe('off');
    expect(truth.sourceAt(at).output).toBe('off');
    expect(inInterval(result, 'dropout-current', 3.4)).toBe(true);
    expect(inInterval(result, 'open-circuit-voltage', 15.08)).toBe(true);
    expect(findingNamed(result.findings, 'dropout-current')?.note).toMatch(
      /^held 3\.\d+ A, dropped 3\.\d+ A/,
    );
  });

  it('is found to be what it is found to be when somebody cycles its input by hand', async () => {
    const bySource = await shown(join(root, 'fixtures/benches/nursery-source.yaml'), module, () => handless);
    const byHand = await shown(
      benchFile((text) => text.replace(/^ +source:.*\n/m, '')),
      module,
      simulatedOperator,
    );
    for (const name of ['limit-style', 'recovery-time', 'usable-current', 'recommended-current']) {
      const [one, other] = [bySource, byHand].map(({ result }) => findingNamed(result.findings, name));
      expect({ name, note: one?.note, bound: one?.bound }).toEqual({
        name,
        note: other?.note,
        bound: other?.bound,
      });
    }
    const { findings } = bySource.result;
    expect(findingNamed(findings, 'limit-style')?.value).toBe('latch-off');
    expect(findingNamed(findings, 'recovery-time')).toMatchObject({
      bound: 'least',
      note: 'it stays off after an overload, until its input is cycled',
    });
    expect(findingNamed(findings, 'usable-current')?.note).toContain(
      'an overload switches it off until its input is cycled',
    );
  });
});

describe('over TCP', () => {
  const brisk = (text: string): string =>
    text.replace('off-for: 5 s', 'off-for: 300 ms').replace(/^ +thermal:.*\n/m, '');
  const ramp = 'load-ramp: { from: 1 A, to: 2.5 A, points: 200, dwell: 100 ms }';
  const ramping = procedureFile('ramping', ramp);
  const quick = procedureFile(
    'quick',
    'open-circuit: { for: 500 ms }',
    'dropout-search: { from: 2.5 A, ceiling: 4 A, climb: 3, resolution: 100 mA, dwell: 100 ms, readings: 2, watch: 200 ms, recovery: 500 ms }',
  );

  async function atBench(change: (text: string) => string = brisk) {
    const into = join(folder, `live-${count}.yaml`);
    const served = await serve(benchFile(change), into, 'tcp');
    onTestFinished(() => served.close());
    return { bench: served.bench, runs: join(folder, `runs-tcp-${count}`) };
  }

  function run(procedure: string, bench: string, runs: string) {
    const child = start([
      ...['run', procedure, '--bench', bench, '--module', module, '--runs', runs, '--yes'],
    ]);
    return { child, end: ended(child) };
  }

  const said = (runs: string, words: string) => until(() => journalOf(runs).includes(words));

  it('a latching module is gone through to the end with no hands', async () => {
    const { bench, runs } = await atBench();
    const { status, stdout, stderr } = await run(quick, bench, runs).end;
    expect(stderr).toContain('takes its input away for 300 ms (1 of');
    expect(stderr).toContain('The load is off; it was read back.\nThe source is off; it was read back.\n');
    expect(status).toBe(0);
    expect(stdout).toMatch(/dropout-current +3\.[34]\d* /);
    expect(journalOf(runs)).toContain('"outcome":"came-back-after-cycling"');
    expect(journalOf(runs)).not.toContain('"event":"prompt"');
    expect(await askLoad(bench)).toBe('0');
    expect(await askSource(bench)).toBe('0');
  });

  it('Ctrl-C in the middle leaves the load off, and the source', async () => {
    const { bench, runs } = await atBench();
    const { child, end } = run(ramping, bench, runs);
    await said(runs, '"phase":"ramp"');
    expect(await askLoad(bench)).toBe('1');
    expect(await askSource(bench)).toBe('1');
    child.kill('SIGINT');
    const { status, stderr } = await end;
    expect(status).toBe(3);
    expect(stderr).toContain('The source is off; it was read back.');
    expect(await askLoad(bench)).toBe('0');
    expect(await askSource(bench)).toBe('0');
  });

  it('Ctrl-C while the input is away leaves it away, and is not waited for', async () => {
    const { bench, runs } = await atBench((text) =>
      brisk(text).replace('off-for: 300 ms', 'off-for: 10 min'),
    );
    const { child, end } = run(quick, bench, runs);
    await said(runs, 'takes its input away');
    await until(async () => (await askSource(bench)) === '0');
    child.kill('SIGINT');
    const { status, stderr } = await end;
    expect(status).toBe(3);
    expect(stderr).toContain('The load is off; it was read back.\nThe source is off; it was read back.\n');
    expect(await askSource(bench)).toBe('0');
  });

  it('a source that loses its power in the middle ends the run, and no dropout is made of it', async () => {
    const file = await readBench(benchFile(brisk));
    const served = await serveBench({
      bench: file.value,
      drivers: planDrivers(await readBenchDrivers(file)),
      clock: realClock,
    });
    onTestFinished(() => served.close());
    const bench = join(folder, `live-${count}.yaml`);
    writeFileSync(bench, withAddresses(file.text, served.addresses));
    const runs = join(folder, `runs-tcp-${count}`);
    const { end } = run(ramping, bench, runs);
    await said(runs, '"phase":"ramp"');
    // Whatever moment the world has come to: it is never carried back.
    served.world.setSource(sourceAtRest, 0);
    const { status, stderr } = await end;
    expect(stderr).toMatch(/the output of the source at .* was on when it was last heard of, and is off now/);
    expect(status).toBe(3);
    expect(journalOf(runs)).not.toContain('"outcome":"dropped"');
    expect(served.world.load.input).toBe('off');
    expect(await askSource(bench)).toBe('0');
  });

  it('after kill -9 the watchman switches the load off and leaves the source, which `safe` then switches off', async () => {
    const { bench, runs } = await atBench();
    const { child, end } = run(ramping, bench, runs);
    await said(runs, '"phase":"ramp"');
    child.kill('SIGKILL');
    await end;
    await until(async () => (await askLoad(bench)) === '0');
    expect(await askSource(bench)).toBe('1');
    const { status, stdout, stderr } = await railproof(['safe', '--bench', bench]);
    expect(stderr).toBe('');
    expect(stdout).toMatch(
      /^The load at tcp:.* is off; it was read back\.\nThe source at tcp:.* is off; it was read back\.\n$/,
    );
    expect(status).toBe(0);
    expect(await askSource(bench)).toBe('0');
  });
});
