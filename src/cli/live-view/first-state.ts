import { cautionOf, wiringFor } from '../../run/cautions.js';
import { timeLeft } from '../../run/time-left.js';
import type { ViewedCaution, ViewState } from '../../view/view-state.js';
import type { LoadedPlan } from '../load-plan.js';

/** What a live view shows before anything was done. */
export function firstState({ plan, resumed }: LoadedPlan, { began }: { readonly began: Date }): ViewState {
  const { procedure, underTest, bench, steps } = plan;
  const done = resumed?.from.steps ?? 0;
  return {
    run: {
      title: procedure.title,
      procedure: procedure.name,
      module: underTest.name,
      rated: { voltage: underTest.rated.voltage, current: underTest.rated.current },
      bench: bench.name,
      simulated: bench.simulation !== undefined,
      began: began.toISOString(),
      done,
      steps: steps.map(({ kind, summary, duration }) => ({ kind: kind.kind, summary, duration })),
    },
    step: 0,
    elapsed: 0,
    remaining: timeLeft(steps, done, Infinity),
    figures: {},
    input: undefined,
    points: [],
    cautions: cautionsShown(plan, resumed),
    question: undefined,
    notices: [],
    stopping: false,
    workingOut: undefined,
    ended: undefined,
  };
}

/** In the order in which they will be asked for. */
function cautionsShown(
  { procedure, cautions, underTest }: LoadedPlan['plan'],
  resumed: LoadedPlan['resumed'],
): readonly ViewedCaution[] {
  const wiring = wiringFor(procedure, resumed?.from);
  return [
    ...(wiring.length === 0 ? [] : [{ name: 'wiring', text: wiring.join('\n'), by: undefined }]),
    ...cautions.map((name) => ({ name, text: cautionOf(name, underTest), by: undefined })),
  ];
}
