import { join } from 'node:path';
import { performPlan } from '../../src/cli/perform-plan.js';
import { simulatedOperator } from '../../src/cli/simulated-operator.js';
import { readBenchDrivers, planDrivers } from '../../src/cli/bench-drivers.js';
import { shipped } from '../../src/cli/shipped.js';
import { vocabulary } from '../../src/cli/vocabulary.js';
import { worldOf } from '../../src/cli/wiring.js';
import type { Bench } from '../../src/files/bench.js';
import type { Module } from '../../src/files/module.js';
import { readProcedure } from '../../src/files/read-procedure.js';
import type { FileRead } from '../../src/files/read-text.js';
import type { Result } from '../../src/report/result.js';
import { makePlan } from '../../src/run/plan.js';
import type { RunWatcher } from '../../src/run/perform.js';
import { stepKinds } from '../../src/steps/index.js';

export const nobodyWatches: RunWatcher = {
  stepBegan: () => undefined,
  progress: () => undefined,
  recorded: () => undefined,
  noticed: () => undefined,
};

/** Performs a shipped procedure on a simulated bench that was made in memory. */
export async function runQuietly(
  procedureName: string,
  bench: Bench,
  module: Module,
  runs: string,
): Promise<Result> {
  const benchFile = asRead(bench, join(runs, 'bench.yaml'));
  const drivers = await readBenchDrivers(benchFile);
  const procedure = await readProcedure(procedureName, vocabulary, {
    relativeTo: '.',
    shipped: shipped.procedures,
  });
  const plan = makePlan(procedure.value, [module], bench, planDrivers(drivers), stepKinds);
  const world = await worldOf(bench, plan.drivers);
  if (world.simulation === undefined) throw new Error('the bench is not simulated');
  const files = { procedure, bench: benchFile, modules: [asRead(module, 'module.yaml')] as const, drivers };
  const performed = await performPlan({ plan, files: { ...files, modules: [files.modules[0]] } }, world, {
    runs,
    operator: simulatedOperator(world.simulation),
    signal: new AbortController().signal,
    hurry: new AbortController().signal,
    watch: nobodyWatches,
  });
  if (performed.understood.kind === 'error') throw performed.understood.error;
  return performed.understood.result;
}

function asRead<T>(value: T, path: string): FileRead<T> {
  return { value, path, text: '' };
}
