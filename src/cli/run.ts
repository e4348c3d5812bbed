import { join } from 'node:path';
import { exitCodes, type ExitCode } from '../errors/railproof-error.js';
import type { Driver } from '../files/driver.js';
import type { FileRead } from '../files/read-text.js';
import { jsonText } from '../report/json-text.js';
import { atDriverLine } from './driver-line.js';
import { junitOfRun } from './junit-of-run.js';
import { placeForJunit } from './junit-written.js';
import type { RunView } from './live-view/run-view.js';
import { loadPlan, type LoadedPlan } from './load-plan.js';
import { planAsJson, planAsText } from './plan-shown.js';
import { loadResumed } from './resume-plan.js';
import { resumptionAsText } from './resume-shown.js';
import { operatorFor, requireOperator } from './run-operator.js';
import { playPlain, playTraced } from './run-played.js';
import { tell } from './run-told.js';
import { type RunOptions, runWanted } from './run-wanted.js';
import { show } from './say.js';
import { stopOnSignals } from './stop-signals.js';
import type { Streams } from './streams.js';
import { worldOf } from './wiring.js';

/** `railproof run`: performs a procedure, or goes on with one that was broken off, and prints what it shows. */
export async function run(options: RunOptions, streams: Streams): Promise<ExitCode> {
  const wanted = runWanted(options);
  const keepJunit = await placeForJunit(options.junit);
  const loaded = wanted.kind === 'afresh' ? await loadPlan(wanted) : await loadResumed(wanted);
  const { plan, resumed } = loaded;
  const done = resumed?.from.steps ?? 0;
  if (resumed !== undefined) show(streams.stderr, resumptionAsText(plan, resumed));
  if (options.dryRun === true) {
    const { stdout } = streams;
    if (options.json === true) stdout.write(jsonText(planAsJson(plan, done)));
    else show(stdout, planAsText(plan, done, stdout.columns));
    return exitCodes.conforms;
  }
  const runs = options.runs ?? (resumed === undefined ? 'runs' : join(resumed.run.folder.path, '..'));
  const isViewed = options.view === true;
  const world = isViewed
    ? await (await import('./live-view/watched-world.js')).watchedWorld(loaded, streams)
    : await worldOf(plan.bench, plan.drivers);
  const stop = stopOnSignals(streams);
  let view: RunView | undefined;
  try {
    if (isViewed) {
      const { openRunView } = await import('./live-view/run-view.js');
      view = await openRunView(loaded, world.clock, stop, streams);
    }
    const yes = options.yes === true;
    const operator = await operatorFor(plan.bench, world, yes, streams, { stop, view });
    requireOperator(loaded, operator, yes);
    const play = options.trace === true ? playTraced : playPlain;
    const junit = await junitOfRun(keepJunit, plan, () => world.clock.wall());
    const performed = await play(loaded, { world, operator, runs, stop, streams, view }).catch(
      async (error: unknown) => {
        await junit.notBegun(error);
        throw error;
      },
    );
    view?.ended(performed);
    const junitUnkept = await junit.end(performed);
    return tell(performed, driverFiles(loaded), { json: options.json === true, junitUnkept }, streams);
  } catch (error) {
    view?.failed(error);
    throw atDriverLine(error, driverFiles(loaded));
  } finally {
    await view?.close();
    stop.release();
  }
}

function driverFiles({ files }: LoadedPlan): readonly FileRead<Driver>[] {
  return files.drivers.map(({ file }) => file);
}
