import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import type { SimulatedFault, SimulatedModule } from '../../src/files/simulation-section.js';
import { readBench } from '../../src/files/read-bench.js';
import { readModule } from '../../src/files/read-module.js';
import type { Result } from '../../src/report/result.js';
import { plainStyle } from '../../src/report/style.js';
import { resultAsText } from '../../src/report/text.js';
import { runQuietly } from './run-quietly.js';

const folder = mkdtempSync(join(tmpdir(), 'railproof-weak-'));

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

/** real-limit on the nursery's K1 as it would be with something wrong. */
async function realLimit(
  change: Partial<SimulatedModule>,
  faults: readonly SimulatedFault[] = [],
): Promise<Result> {
  const { value: bench } = await readBench('fixtures/benches/nursery.yaml');
  const { value: module } = await readModule('fixtures/modules/K1.yaml');
  const { simulation } = bench;
  const [k1] = simulation?.modules ?? [];
  if (simulation === undefined || k1 === undefined) throw new Error('the nursery is simulated');
  // Steady up to its limit, wherever that is now.
  const modules = [{ ...k1, unsteadyAbove: 100, ...change }];
  return runQuietly(
    'real-limit',
    { ...bench, simulation: { ...simulation, modules, faults } },
    module,
    folder,
  );
}

function valueOf({ findings }: Result, name: string): number | string | undefined {
  return findings.find((finding) => finding.name === name)?.value;
}

describe('a module that holds half its nameplate', () => {
  it('is never loaded again beyond what it was seen to drop, and its limit is found', async () => {
    const result = await realLimit({ limit: { style: 'hiccup', current: 2, period: 0.8 } });
    const [, ramp, search] = result.evidence.steps;
    const dropped = ramp?.points.find((point) => point.outcome === 'dropped')?.set.current ?? Number.NaN;
    expect(ramp?.recoveries.map(({ outcome }) => outcome)).toEqual(['came-back']);
    const probed =
      search?.points.flatMap(({ set }) => (set.current === undefined ? [] : [set.current])) ?? [];
    expect(Math.max(...probed)).toBeLessThan(dropped);
    expect(valueOf(result, 'dropout-current')).toBeCloseTo(2, 1);
    expect(valueOf(result, 'limit-style')).toBe('hiccup');
    expect(result.outcome).toBe('does-not-conform');
  });
});

describe('a module that dies on the bench', () => {
  it('stops the run, and is not recommended for anything', async () => {
    const result = await realLimit({}, [{ at: 15, what: 'module-dead' }]);
    expect(result.evidence.ended).toMatchObject({ how: 'stopped', status: 3 });
    expect(valueOf(result, 'recommended-current')).toBe(0);
    expect(valueOf(result, 'limit-style')).not.toBe('latch-off');
    const text = resultAsText(result, plainStyle);
    expect(text).toContain(
      'STOPPED: the module stays off after an overload, even after its input was cycled',
    );
    expect(text).toContain('As far as the run went, do not load it.');
    expect(text).toContain('it gave no voltage again after that');
  });
});
