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
    `${underTestInWords(plan)} on ${plan.bench.name}`,
    ...plan.procedure.wiring.map((line) => `  wiring: ${line}`),
    ...alignTable(rows, ['right', 'left', 'left', 'left']).map((row) => `  ${row}`),
    `cautions to acknowledge: ${plan.cautions.length === 0 ? 'none' : plan.cautions.join(', ')}`,
    `never above ${formatQuantity(current.value, 'current')} (${current.setBy}), ` +
      `${formatQuantity(voltage.value, 'voltage')} (${voltage.setBy}), ` +
      `${formatQuantity(power.value, 'power')} (${power.setBy})`,
    `about ${formatQuantity(Math.ceil(plan.duration), 'time')} in all; nothing was touched`,
    '',
  ].join('\n');
}

function underTestInWords({ underTest: { circuit, name } }: Plan): string {
  return circuit === 'single' ? `module ${name}` : `modules ${name} in ${circuit}`;
}

/** The same for a program; times in seconds, ceilings in A, V and W. */
export function planAsJson(plan: Plan): object {
  return {
    format: 'railproof/plan 1',
    procedure: plan.procedure.name,
    module: plan.underTest.name,
    circuit: plan.underTest.circuit,
    bench: plan.bench.name,
    steps: plan.steps.map(({ kind, summary, duration }) => ({ kind: kind.kind, summary, seconds: duration })),
    wiring: plan.procedure.wiring,
    cautions: plan.cautions,
    ceilings: plan.ceilings,
    seconds: plan.duration,
  };
}
