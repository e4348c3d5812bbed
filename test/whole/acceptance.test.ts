import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { baselineOf, findTolerance } from '../../src/cli/baseline.js';
import { readBench } from '../../src/files/read-bench.js';
import { readModule } from '../../src/files/read-module.js';
import type { SimulatedModule } from '../../src/files/simulation-section.js';
import { judge } from '../../src/judgement/judge.js';
import type { Result } from '../../src/report/result.js';
import { runQuietly } from './run-quietly.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-acceptance-'));

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

async function acceptance(seed: number, change: Partial<SimulatedModule> = {}): Promise<Result> {
  const { value: bench } = await readBench('fixtures/benches/nursery.yaml');
  const { value: module } = await readModule('fixtures/modules/K1.yaml');
  const { simulation } = bench;
  const [k1] = simulation?.modules ?? [];
  if (simulation === undefined || k1 === undefined) throw new Error('the nursery is simulated');
  const modules = [{ ...k1, ...change }];
  return runQuietly('acceptance', { ...bench, simulation: { ...simulation, seed, modules } }, module, folder);
}

/** What is decided of a run that was made with the first one as its baseline. */
async function against(before: Result, after: Result) {
  const tolerance = await findTolerance('earth-link-removed');
  return judge({ ...after.header, baseline: baselineOf(before, tolerance.value) }, after.findings);
}

describe('the acceptance of a module after its earth link was removed', { timeout: 60_000 }, () => {
  it('does not conform while the output is bonded, for that reason alone', async () => {
    const before = await acceptance(3, { earth: 'bonded' });
    expect(before.evidence.ended).toMatchObject({ how: 'completed' });
    const failing = before.decisions.filter(({ outcome }) => outcome !== 'conforms');
    expect(failing).toMatchObject([{ finding: 'earth-relation', outcome: 'does-not-conform' }]);
  });

  it.each([1, 2, 3])('conforms when that is all that changed, seed %i', async (seed) => {
    const before = await acceptance(seed, { earth: 'bonded' });
    const after = await acceptance(seed + 100, { earth: 'isolated' });
    const decisions = await against(before, after);
    expect(decisions.filter(({ outcome }) => outcome !== 'conforms')).toEqual([]);
    expect(decisions).toContainEqual(
      expect.objectContaining({ finding: 'earth-relation', note: 'from bonded to isolated' }),
    );
  });

  it('does not conform when the droop has doubled, and says by how much it moved', async () => {
    const before = await acceptance(1, { earth: 'bonded' });
    const damaged = await acceptance(101, { earth: 'isolated', droopResistance: 0.036 });
    const failing = (await against(before, damaged)).filter(({ outcome }) => outcome === 'does-not-conform');
    expect(failing.map(({ finding }) => finding).sort()).toEqual(['droop-resistance', 'load-regulation']);
    const droop = failing.find(({ finding }) => finding === 'droop-resistance');
    expect(droop?.note).toMatch(/moved by \+?1[78]\.\d+ ± /);
  });

  it('does not conform when the link is still there', async () => {
    const before = await acceptance(1, { earth: 'bonded' });
    const decisions = await against(before, await acceptance(101, { earth: 'bonded' }));
    expect(
      decisions.filter(({ outcome }) => outcome === 'does-not-conform').map(({ finding }) => finding),
    ).toEqual(['earth-relation', 'earth-relation']);
  });
});
