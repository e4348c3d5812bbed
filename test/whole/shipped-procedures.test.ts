import { mkdtempSync, readdirSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { loadPlan } from '../../src/cli/load-plan.js';
import { performPlan } from '../../src/cli/perform-plan.js';
import { simulatedOperator } from '../../src/cli/simulated-operator.js';
import { shipped, vocabulary, worldOf } from '../../src/cli/wiring.js';
import { findingNamed } from '../../src/analysis/finding.js';
import { readProcedure } from '../../src/files/read-procedure.js';
import type { Result } from '../../src/report/result.js';
import { nobodyWatches } from './run-quietly.js';

/** Each shipped procedure, where it is shown, and what one runs it for. */
const shown: Readonly<
  Record<string, { bench: string; modules: readonly string[]; finds: readonly string[] }>
> = {
  'quick-look': { bench: 'nursery', modules: ['K1'], finds: ['open-circuit-voltage', 'droop-resistance'] },
  'real-limit': {
    bench: 'nursery',
    modules: ['K1'],
    finds: ['usable-current', 'recommended-current', 'dropout-current', 'limit-style', 'recovery-time'],
  },
  'limit-shape': {
    bench: 'nursery-foldback',
    modules: ['K1'],
    finds: ['limit-style', 'short-circuit-current', 'droop-resistance'],
  },
  'thermal-soak': {
    bench: 'nursery-soak',
    modules: ['K1'],
    finds: ['temperature-rise', 'thermal-time-constant', 'thermal-drift', 'recommended-current'],
  },
  isolation: {
    bench: 'nursery-isolation',
    modules: ['K1'],
    finds: ['earth-relation', 'earth-resistance'],
  },
  acceptance: {
    bench: 'nursery-isolation',
    modules: ['K1'],
    finds: ['earth-relation', 'open-circuit-voltage', 'droop-resistance', 'usable-current', 'recovery-time'],
  },
  sharing: {
    bench: 'group-ballast',
    modules: ['K1', 'K2'],
    finds: [
      'share-of-K1',
      'share-of-K2',
      'imbalance',
      'hogging-module',
      'group-current',
      'recommended-ballast',
    ],
  },
  stacking: {
    bench: 'stack',
    modules: ['K1', 'K2', 'K3'],
    finds: [
      'stack-voltage',
      'weakest-module',
      'float-voltage-of-K3',
      'group-current',
      'earth-relation-of-K2',
    ],
  },
};

const names = readdirSync(shipped.procedures)
  .filter((file) => file.endsWith('.yaml'))
  .map((file) => file.replace(/\.yaml$/, ''));
const runs = mkdtempSync(join(tmpdir(), 'railproof-shipped-'));

afterAll(() => {
  rmSync(runs, { recursive: true, force: true });
});

describe('a shipped procedure', () => {
  it('is shown on a bench, each of them', () => {
    expect(Object.keys(shown).sort()).toEqual([...names].sort());
  });

  it.each(names)(
    '%s says what it is for, how the bench is wired, what to mind and what is required',
    async (name) => {
      const { value } = await readProcedure(name, vocabulary, {
        relativeTo: '.',
        shipped: shipped.procedures,
      });
      expect(value.name).toBe(name);
      expect(value.purpose.length).toBeGreaterThan(60);
      expect(value.wiring.length).toBeGreaterThanOrEqual(3);
      expect(value.cautions).toContain('mains');
      expect(value.criteria.length).toBeGreaterThanOrEqual(1);
    },
  );

  it.each(Object.entries(shown))('%s runs to what it is for', async (name, { bench, modules, finds }) => {
    const result = await resultOf(name, bench, modules);
    expect(result.evidence.ended).toMatchObject({ how: 'completed', reason: null });
    expect(result.integrity.kind).toBe('whole');
    for (const finding of finds) {
      expect(findingNamed(result.findings, finding)?.value, finding).not.toBeOneOf([
        undefined,
        'undetermined',
      ]);
    }
    expect(result.outcome).toBe('conforms');
  });
});

async function resultOf(procedure: string, bench: string, modules: readonly string[]): Promise<Result> {
  const loaded = await loadPlan({
    procedure,
    bench: `fixtures/benches/${bench}.yaml`,
    modules: modules.map((module) => `fixtures/modules/${module}.yaml`),
  });
  const world = await worldOf(loaded.plan.bench, loaded.plan.drivers);
  if (world.simulation === undefined) throw new Error(`${bench} is not simulated`);
  const { understood, safety } = await performPlan(loaded, world, {
    runs,
    operator: simulatedOperator(world.simulation),
    signal: new AbortController().signal,
    hurry: new AbortController().signal,
    watch: nobodyWatches,
  });
  expect(safety).toEqual({ kind: 'confirmed' });
  if (understood.kind === 'error') throw understood.error;
  return understood.result;
}
