import { expect } from 'vitest';
import { loadPlan } from '../../src/cli/load-plan.js';
import { performPlan } from '../../src/cli/perform-plan.js';
import { simulatedOperator } from '../../src/cli/simulated-operator.js';
import { worldOf } from '../../src/cli/wiring.js';
import type { Result } from '../../src/report/result.js';
import { nobodyWatches } from './run-quietly.js';

/** Each shipped procedure, where it is shown, and what one runs it for. */
export const shown: Readonly<
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

/** Performs a shipped procedure where it is shown; its record is a folder of `runs`. */
export async function runShipped(procedure: string, runs: string): Promise<Result> {
  const { bench, modules } = shown[procedure] ?? { bench: procedure, modules: [] };
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
