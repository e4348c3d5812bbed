import { formatQuantity } from '../quantity/format-quantity.js';
import { alignTable } from '../report/align.js';
import type { Plan } from '../run/plan.js';

/** A plan for a person: what would be done, how long it takes, what the bench never allows. */
export function planAsText(plan: Plan): string {
  const { current, voltage, power } = plan.ceilings;
  const rows = plan.steps.map(({ kind, summary, duration }, index) => [
    `${index + 1}`,
    kind.kind,
    summary,
    `about ${formatQuantity(Math.ceil(duration), 'time')}`,
  ]);
  return [
    `${plan.procedure.name}: ${plan.procedure.title}`,
    `module ${plan.module.name} on ${plan.bench.name}`,
    ...alignTable(rows, ['right', 'left', 'left', 'left']).map((row) => `  ${row}`),
    `cautions to acknowledge: ${plan.cautions.length === 0 ? 'none' : plan.cautions.join(', ')}`,
    `never above ${formatQuantity(current.value, 'current')} (${current.setBy}), ` +
      `${formatQuantity(voltage.value, 'voltage')} (${voltage.setBy}), ` +
      `${formatQuantity(power.value, 'power')} (${power.setBy})`,
    `about ${formatQuantity(Math.ceil(plan.duration), 'time')} in all; nothing was touched`,
    '',
  ].join('\n');
}

/** The same for a program; times in seconds, ceilings in A, V and W. */
export function planAsJson(plan: Plan): object {
  return {
    format: 'railproof/plan 1',
    procedure: plan.procedure.name,
    module: plan.module.name,
    bench: plan.bench.name,
    steps: plan.steps.map(({ kind, summary, duration }) => ({ kind: kind.kind, summary, seconds: duration })),
    cautions: plan.cautions,
    ceilings: plan.ceilings,
    seconds: plan.duration,
  };
}
