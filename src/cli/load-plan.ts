import type { Bench } from '../files/bench.js';
import type { Module } from '../files/module.js';
import { readBench } from '../files/read-bench.js';
import { readModule } from '../files/read-module.js';
import { readProcedure } from '../files/read-procedure.js';
import type { Procedure } from '../files/procedure.js';
import type { FileRead } from '../files/read-text.js';
import { makePlan, type Plan } from '../run/plan.js';
import { stepKinds } from '../steps/index.js';
import { planDrivers, readBenchDrivers, shipped, type DriverFiles, vocabulary } from './wiring.js';

export interface PlanFiles {
  readonly procedure: FileRead<Procedure>;
  readonly bench: FileRead<Bench>;
  readonly modules: readonly [FileRead<Module>, ...FileRead<Module>[]];
  readonly drivers: DriverFiles;
}

export interface LoadedPlan {
  readonly plan: Plan;
  readonly files: PlanFiles;
}

/**
 * Reads every file that a run needs and checks that they fit together.
 * @throws BadFileError, MissingFileError, PlanError
 */
export async function loadPlan(wanted: {
  readonly procedure: string;
  readonly bench: string;
  readonly modules: readonly string[];
}): Promise<LoadedPlan> {
  const bench = await readBench(wanted.bench);
  const drivers = await readBenchDrivers(bench);
  const [first, ...others] = await Promise.all(wanted.modules.map((path) => readModule(path)));
  if (first === undefined) throw new Error('a run has at least one module');
  const procedure = await readProcedure(wanted.procedure, vocabulary, {
    relativeTo: '.',
    shipped: shipped.procedures,
  });
  const plan = makePlan(
    procedure.value,
    [first.value, ...others.map((module) => module.value)],
    bench.value,
    planDrivers(drivers),
    stepKinds,
  );
  return { plan, files: { procedure, bench, modules: [first, ...others], drivers } };
}
