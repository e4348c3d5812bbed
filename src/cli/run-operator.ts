import type { Bench } from '../files/bench.js';
import { wiringFor } from '../run/cautions.js';
import { needsOperator } from '../run/plan-circuit.js';
import { OperatorAbsentError } from '../run/stopped.js';
import { TerminalOperator } from '../run/terminal-operator.js';
import type { Operator } from '../steps/operator.js';
import type { RunView } from './live-view/run-view.js';
import type { LoadedPlan } from './load-plan.js';
import { recordedOperator } from './recorded-operator.js';
import { simulatedOperator } from './simulated-operator.js';
import type { StopWishes } from './stop-signals.js';
import type { Streams } from './streams.js';
import type { World } from './wiring.js';

/**
 * Who stands at the bench: whoever stood there when it was recorded, whoever comes with a simulated one, or the
 * person at the terminal, who may look at a live view as well.
 */
export async function operatorFor(
  { operator }: Bench,
  world: World,
  yes: boolean,
  streams: Streams,
  { stop, view }: { readonly stop: StopWishes; readonly view: RunView | undefined },
): Promise<Operator> {
  if (operator !== undefined) return recordedOperator(operator.file, world.clock);
  if (world.simulation !== undefined) return simulatedOperator(world.simulation);
  const terminal = new TerminalOperator({
    ...{ input: streams.stdin, output: streams.stderr, yes },
    interrupted: () => {
      stop.wish();
    },
  });
  return view === undefined ? terminal : view.operator(terminal, yes);
}

/** A procedure that needs a person does not begin without one. @throws OperatorAbsentError */
export function requireOperator({ plan, resumed }: LoadedPlan, operator: Operator, yes: boolean): void {
  if (operator.present) return;
  const done = resumed?.from.steps ?? 0;
  const needing = plan.steps.flatMap((step, index) =>
    index >= done && needsOperator(step, plan.bench) ? [`step ${index + 1} (${step.kind.kind})`] : [],
  );
  if (!yes && wiringFor(plan.procedure, resumed?.from).length > 0) needing.push('its wiring');
  if (!yes && plan.cautions.length > 0) needing.push('its cautions');
  if (needing.length > 0) throw new OperatorAbsentError(needing);
}
