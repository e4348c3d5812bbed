import { exitCodeOf, exitCodes, type ExitCode } from '../errors/railproof-error.js';
import { jsonText } from '../report/json-text.js';
import type { Plan } from '../run/plan.js';
import { needsOperator } from '../run/plan-circuit.js';
import { OperatorAbsentError } from '../run/stopped.js';
import { TerminalOperator } from '../run/terminal-operator.js';
import type { Operator } from '../steps/operator.js';
import { errorText } from './error-text.js';
import { statusOfOutcome } from './exit-status.js';
import { loadPlan } from './load-plan.js';
import { performPlan, type PlanPerformed } from './perform-plan.js';
import { planAsJson, planAsText } from './plan-shown.js';
import { ProgressLine } from './progress-line.js';
import { shown } from './shown.js';
import { simulatedOperator } from './simulated-operator.js';
import { stopOnSignals, type StopWishes } from './stop-signals.js';
import type { Streams } from './streams.js';
import { type World, worldOf } from './wiring.js';

export interface RunWanted {
  readonly procedure: string;
  readonly bench: string;
  readonly module: readonly string[];
  readonly runs: string;
  readonly baseline?: string;
  readonly tolerance?: string;
  readonly yes?: boolean;
  readonly dryRun?: boolean;
  readonly json?: boolean;
}

/** `railproof run`: performs a procedure and prints what it shows. */
export async function run(wanted: RunWanted, streams: Streams): Promise<ExitCode> {
  const loaded = await loadPlan({
    procedure: wanted.procedure,
    bench: wanted.bench,
    modules: wanted.module,
    baseline: wanted.baseline,
    tolerance: wanted.tolerance,
  });
  if (wanted.dryRun === true) {
    streams.stdout.write(wanted.json === true ? jsonText(planAsJson(loaded.plan)) : planAsText(loaded.plan));
    return exitCodes.conforms;
  }
  const world = await worldOf(loaded.plan.bench, loaded.plan.drivers);
  const stop = stopOnSignals(streams);
  const operator = operatorFor(world, wanted.yes === true, streams, stop);
  const watch = new ProgressLine(streams.stderr, loaded.plan, world.clock);
  try {
    requireOperator(loaded.plan, operator, wanted.yes === true);
    const performed = await performPlan(loaded, world, {
      runs: wanted.runs,
      operator,
      signal: stop.signal,
      hurry: stop.hurry,
      watch,
    });
    watch.clear();
    return tell(performed, wanted.json === true, streams);
  } finally {
    stop.release();
  }
}

/** The result first, where there is one; then, whatever happened, whether the load is off, as the last words. */
function tell(performed: PlanPerformed, json: boolean, streams: Streams): ExitCode {
  const { understood, ending, safety, folder, status } = performed;
  if (understood.kind === 'result') streams.stdout.write(shown(understood.result, json, streams));
  streams.stderr.write(`record: ${folder.path}\n`);
  if (ending.how !== 'completed') streams.stderr.write(`${errorText(ending.error)}\n`);
  if (understood.kind === 'error') streams.stderr.write(`${errorText(understood.error)}\n`);
  if (safety.kind === 'unconfirmed') {
    streams.stderr.write(
      `\nIt could not be confirmed that the load is off: ${safety.why}\n${safety.advice}\n`,
    );
  } else {
    streams.stderr.write('The load is off; it was read back.\n');
  }
  if (status !== exitCodes.conforms) return status;
  return understood.kind === 'result'
    ? statusOfOutcome(understood.result.outcome)
    : exitCodeOf(understood.error);
}

function operatorFor(world: World, yes: boolean, streams: Streams, stop: StopWishes): Operator {
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
function requireOperator(plan: Plan, operator: Operator, yes: boolean): void {
  if (operator.present) return;
  const needing = plan.steps.flatMap((step, index) =>
    needsOperator(step, plan.bench) ? [`step ${index + 1} (${step.kind.kind})`] : [],
  );
  if (!yes && plan.procedure.wiring.length > 0) needing.push('its wiring');
  if (!yes && plan.cautions.length > 0) needing.push('its cautions');
  if (needing.length > 0) throw new OperatorAbsentError(needing);
}
