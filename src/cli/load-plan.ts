import { dirname } from 'node:path';
import type { Bench } from '../files/bench.js';
import type { Module } from '../files/module.js';
import { readBench } from '../files/read-bench.js';
import { readModule } from '../files/read-module.js';
import { readProcedure } from '../files/read-procedure.js';
import type { Procedure } from '../files/procedure.js';
import type { FileRead } from '../files/read-text.js';
import { makePlan, type Plan } from '../run/plan.js';
import { stepKinds } from '../steps/index.js';
import { defaultTolerance, loadBaseline, type LoadedBaseline, NoBaselineError } from './baseline.js';
import type { Resumption } from './resume-plan.js';
import { planDrivers, readBenchDrivers, type DriverFiles } from './bench-drivers.js';
import { shipped } from './shipped.js';
import { vocabulary } from './vocabulary.js';

export interface PlanFiles {
  readonly procedure: FileRead<Procedure>;
  readonly bench: FileRead<Bench>;
  readonly modules: readonly [FileRead<Module>, ...FileRead<Module>[]];
  readonly drivers: DriverFiles;
}

export interface LoadedPlan {
  readonly plan: Plan;
  readonly files: PlanFiles;
  /** Where it is to be judged against an earlier run. */
  readonly baseline?: LoadedBaseline;
  /** Where it goes on with a run that was broken off. */
  readonly resumed?: Resumption;
}

/**
 * Reads every file that a run needs, and the record that it is judged against, and checks that they fit
 * together. Without a tolerance the procedure's own counts, and without that nothing may have changed.
 * @throws BadFileError, MissingFileError, PlanError, NoRecordError, BadRecordError, BadBaselineError, NoBaselineError
 */
export async function loadPlan(wanted: {
  readonly procedure: string;
  readonly bench: string;
  readonly modules: readonly string[];
  readonly baseline?: string | undefined;
  readonly tolerance?: string | undefined;
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
  const baseline = await baselineFor(wanted, procedure);
  return {
    plan,
    files: { procedure, bench, modules: [first, ...others], drivers },
    ...(baseline === undefined ? {} : { baseline }),
  };
}

async function baselineFor(
  {
    baseline,
    tolerance,
  }: { readonly baseline?: string | undefined; readonly tolerance?: string | undefined },
  procedure: FileRead<Procedure>,
): Promise<LoadedBaseline | undefined> {
  if (baseline === undefined) {
    if (tolerance !== undefined) throw new NoBaselineError(tolerance);
    return undefined;
  }
  // A path in a procedure starts from its folder, as a driver's does from that of its bench.
  return tolerance === undefined && procedure.value.tolerance !== undefined
    ? loadBaseline({
        run: baseline,
        tolerance: procedure.value.tolerance,
        relativeTo: dirname(procedure.path),
      })
    : loadBaseline({ run: baseline, tolerance: tolerance ?? defaultTolerance, relativeTo: '.' });
}
