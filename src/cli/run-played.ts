import { printable } from '../quantity/printable.js';
import type { Operator } from '../steps/operator.js';
import type { RunView } from './live-view/run-view.js';
import type { LoadedPlan } from './load-plan.js';
import { performPlan, type PerformOptions, type PlanPerformed } from './perform-plan.js';
import { counted } from './progress/counted.js';
import { runProgress } from './progress/run-progress.js';
import { RunSoFar } from './progress/run-so-far.js';
import { say } from './say.js';
import type { StopWishes } from './stop-signals.js';
import type { Streams } from './streams.js';
import { keepAlone, keepWith, replayHint, tracedRun } from './traced-run.js';
import type { World } from './wiring.js';

export interface Stage {
  readonly world: World;
  readonly operator: Operator;
  readonly runs: string;
  readonly stop: StopWishes;
  readonly streams: Streams;
  readonly view: RunView | undefined;
}

/** Performs a plan, shown at the terminal and, where there is one, in the live view. */
export async function playPlain(
  loaded: LoadedPlan,
  { world, operator, runs, stop, streams, view }: Stage,
  recorded?: PerformOptions['recorded'],
): Promise<PlanPerformed> {
  const run = new RunSoFar(loaded.plan, world.clock, loaded.resumed?.from.steps ?? 0);
  const atTerminal = await runProgress(streams, run);
  const watch = counted(run, atTerminal, ...(view === undefined ? [] : [view.progress(run)]));
  const { signal, hurry } = stop;
  try {
    return await performPlan(loaded, world, {
      ...{ runs, operator, signal, hurry, watch },
      ...(recorded && { recorded }),
      ...(view && { left: (performed, folder) => view.left(performed, folder) }),
    });
  } finally {
    watch.end();
  }
}

/** The same, and every byte kept: with the record, or, where there came to be none, beside the others. */
export async function playTraced(loaded: LoadedPlan, stage: Stage): Promise<PlanPerformed> {
  const { stderr } = stage.streams;
  const { world, operator, files } = tracedRun(stage.world, stage.operator, (text) => {
    say(stderr, `\n${printable(text)}`);
  });
  try {
    return await playPlain(loaded, { ...stage, world, operator }, (folder) => {
      keepWith(folder, files, loaded);
    });
  } catch (error) {
    keepAlone(files, loaded, stage.runs, world.clock.wall());
    throw error;
  } finally {
    if (files.folder !== undefined) stderr.write(replayHint(loaded, files.folder));
    files.close();
  }
}
