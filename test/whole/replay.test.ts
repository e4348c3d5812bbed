import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, expect, it } from 'vitest';
import { loadPlan } from '../../src/cli/load-plan.js';
import { performPlan } from '../../src/cli/perform-plan.js';
import { simulatedOperator } from '../../src/cli/simulated-operator.js';
import { worldOf } from '../../src/cli/wiring.js';
import { resultAsJson } from '../../src/report/json.js';
import { understand } from '../../src/report/understand.js';
import { railproof } from './railproof.js';
import { recording } from './recording.js';
import { nobodyWatches } from './run-quietly.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-replay-'));

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

it('a recorded dialogue, replayed, gives the same findings to the last digit', async () => {
  const nursery = 'fixtures/benches/nursery.yaml';
  const module = 'fixtures/modules/K1.yaml';
  const loaded = await loadPlan({ procedure: 'real-limit', bench: nursery, modules: [module] });
  const world = await worldOf(loaded.plan.bench, loaded.plan.drivers);
  if (world.simulation === undefined) throw new Error('the nursery is simulated');
  const recorded = await performPlan(
    loaded,
    { ...world, connect: recording(world.connect, world.clock, folder) },
    {
      runs: join(folder, 'recorded'),
      operator: simulatedOperator(world.simulation),
      signal: new AbortController().signal,
      hurry: new AbortController().signal,
      watch: nobodyWatches,
    },
  );

  const bench = join(folder, 'bench.yaml');
  writeFileSync(
    bench,
    readFileSync(nursery, 'utf8')
      .replace(/(load:.*)'simulated:'/, `$1'replay:load.jsonl'`)
      .replace(/(meter:.*)'simulated:'/, `$1'replay:meter.jsonl'`)
      .replace(/simulation:[^]*/, ''),
  );
  const runs = join(folder, 'replayed');
  const { status, stdout, stderr } = await railproof([
    ...['run', 'real-limit', '--bench', bench, '--module', module],
    ...['--runs', runs, '--yes', '--json'],
  ]);
  expect(stderr).toContain('The load is off; it was read back.');
  expect(status).toBe(0);
  const findings = (result: object): unknown => (result as { findings: unknown }).findings;
  expect(findings(JSON.parse(stdout) as object)).toEqual(
    findings(resultAsJson(understand(recorded.folder.path))),
  );
  expect(readdirSync(runs)).toHaveLength(1);
});
