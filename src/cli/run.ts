import { join } from 'node:path';
import { exitCodeOf, exitCodes, type ExitCode } from '../errors/railproof-error.js';
import type { Driver } from '../files/driver.js';
import type { FileRead } from '../files/read-text.js';
import { printable } from '../quantity/printable.js';
import { jsonText } from '../report/json-text.js';
import type { Bench } from '../files/bench.js';
import { needsOperator } from '../run/plan-circuit.js';
import { OperatorAbsentError } from '../run/stopped.js';
import { TerminalOperator } from '../run/terminal-operator.js';
import type { Operator } from '../steps/operator.js';
import { atDriverLine } from './driver-line.js';
import { errorText } from './error-text.js';
import { statusOfOutcome } from './exit-status.js';
import { loadPlan, type LoadedPlan } from './load-plan.js';
import { performPlan, type PerformOptions, type PlanPerformed } from './perform-plan.js';
import { planAsJson, planAsText } from './plan-shown.js';
import { runProgress } from './progress/run-progress.js';
import { recordedOperator } from './recorded-operator.js';
import { resumeHint } from './resume-hint.js';
import { loadResumed } from './resume-plan.js';
import { resumptionAsText } from './resume-shown.js';
import { type RunOptions, runWanted } from './run-wanted.js';
import { say, show } from './say.js';
import { shown } from './shown.js';
import { simulatedOperator } from './simulated-operator.js';
import { stopOnSignals, type StopWishes } from './stop-signals.js';
import type { Streams } from './streams.js';
import { keepAlone, keepWith, replayHint, tracedRun } from './traced-run.js';
import { type World, worldOf } from './wiring.js';

/** `railproof run`: performs a procedure, or goes on with one that was broken off, and prints what it shows. */
export async function run(options: RunOptions, streams: Streams): Promise<ExitCode> {
  const wanted = runWanted(options);
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
  const world = await worldOf(plan.bench, plan.drivers);
  const stop = stopOnSignals(streams);
  try {
    const operator = await operatorFor(plan.bench, world, options.yes === true, streams, stop);
    requireOperator(loaded, operator, options.yes === true);
    const play = options.trace === true ? playTraced : playPlain;
    const performed = await play(loaded, { world, operator, runs, stop, streams });
    return tell(performed, driverFiles(loaded), options.json === true, streams);
  } catch (error) {
    throw atDriverLine(error, driverFiles(loaded));
  } finally {
    stop.release();
  }
}

function driverFiles({ files }: LoadedPlan): readonly FileRead<Driver>[] {
  return files.drivers.map(({ file }) => file);
}

interface Stage {
  readonly world: World;
  readonly operator: Operator;
  readonly runs: string;
  readonly stop: StopWishes;
  readonly streams: Streams;
}

async function playPlain(
  loaded: LoadedPlan,
  { world, operator, runs, stop, streams }: Stage,
  recorded?: PerformOptions['recorded'],
): Promise<PlanPerformed> {
  const watch = await runProgress(streams, loaded.plan, world.clock, loaded.resumed?.from.steps);
  const { signal, hurry } = stop;
  try {
    return await performPlan(loaded, world, {
      ...{ runs, operator, signal, hurry, watch },
      ...(recorded && { recorded }),
    });
  } finally {
    watch.end();
  }
}

/** The same, and every byte kept: with the record, or, where there came to be none, beside the others. */
async function playTraced(loaded: LoadedPlan, stage: Stage): Promise<PlanPerformed> {
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

/** The result first, where there is one; then, whatever happened, whether the load is off, as the last words. */
function tell(
  performed: PlanPerformed,
  drivers: readonly FileRead<Driver>[],
  json: boolean,
  streams: Streams,
): ExitCode {
  const { understood, ending, folder, status } = performed;
  if (understood.kind === 'result') streams.stdout.write(shown(understood.result, json, streams));
  streams.stderr.write(`record: ${printable(folder.path)}\n`);
  if (ending.how !== 'completed') say(streams.stderr, errorText(atDriverLine(ending.error, drivers)));
  if (understood.kind === 'error') say(streams.stderr, errorText(understood.error));
  if (understood.kind === 'result' && understood.unkept !== undefined) {
    const missing = printable(understood.unkept.message);
    say(streams.stderr, `${missing}; the journal holds it all, and \`railproof analyse\` shows it.`);
  }
  if (understood.kind === 'result') streams.stderr.write(resumeHint(folder.path, understood.result));
  tellSafety(performed, streams);
  if (status !== exitCodes.conforms) return status;
  return understood.kind === 'result'
    ? statusOfOutcome(understood.result.outcome)
    : exitCodeOf(understood.error);
}

/** Last of all what a person must see to, and of that the load. */
function tellSafety({ safety, sourceSafety }: PlanPerformed, { stderr }: Streams): void {
  const each = [
    { what: 'load', safety },
    ...(sourceSafety === undefined ? [] : [{ what: 'source', safety: sourceSafety }]),
  ];
  for (const { what, safety } of each) {
    if (safety.kind === 'confirmed') stderr.write(`The ${what} is off; it was read back.\n`);
  }
  for (const { what, safety } of each.reverse()) {
    if (safety.kind === 'confirmed') continue;
    const why = printable(safety.why);
    say(stderr, `\nIt could not be confirmed that the ${what} is off: ${why}\n${safety.advice}`);
  }
}

async function operatorFor(
  { operator }: Bench,
  world: World,
  yes: boolean,
  streams: Streams,
  stop: StopWishes,
): Promise<Operator> {
  if (operator !== undefined) return recordedOperator(operator.file, world.clock);
  return world.simulation === undefined
    ? new TerminalOperator({
        input: streams.stdin,
        output: streams.stderr,
        yes,
        interrupted: stop.wish,
      })
    : simulatedOperator(world.simulation);
}

/** A procedure that needs a person does not begin without one. @throws OperatorAbsentError */
function requireOperator({ plan, resumed }: LoadedPlan, operator: Operator, yes: boolean): void {
  if (operator.present) return;
  const done = resumed?.from.steps ?? 0;
  const needing = plan.steps.flatMap((step, index) =>
    index >= done && needsOperator(step, plan.bench) ? [`step ${index + 1} (${step.kind.kind})`] : [],
  );
  const wiring = [...plan.procedure.wiring, ...(resumed?.from.standing ?? [])];
  if (!yes && wiring.length > 0) needing.push('its wiring');
  if (!yes && plan.cautions.length > 0) needing.push('its cautions');
  if (needing.length > 0) throw new OperatorAbsentError(needing);
}
