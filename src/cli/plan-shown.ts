import { type Ceiling, type Ceilings, ceilingText } from '../bench/ceilings.js';
import { feedInWords } from '../bench/source.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import { printable } from '../quantity/printable.js';
import { spokenTime } from '../quantity/spoken-time.js';
import type { Dimension, Seconds } from '../quantity/quantity.js';
import { fittedTable } from '../report/align.js';
import type { Plan } from '../run/plan.js';
import type { PlanJson } from './schema/plan-schema.js';

/** A plan for a person: what would be done, how long it takes, what the bench never allows; the first `done` steps of it are done. */
export function planAsText(plan: Plan, done = 0, columns?: number): string {
  const rows = plan.steps.map(({ kind, summary, duration }, index) => [
    `${index + 1}`,
    kind.kind,
    index < done ? 'done' : `about ${spokenTime(Math.ceil(duration))}`,
    printable(summary),
  ]);
  return [
    `${plan.procedure.name}: ${printable(plan.procedure.title)}`,
    `${underTestInWords(plan)} on ${printable(plan.bench.name)}`,
    ...plan.procedure.wiring.map((line) => `  wiring: ${printable(line)}`),
    ...fittedTable(rows, ['right', 'left', 'right', 'left'], columns),
    `cautions to acknowledge: ${plan.cautions.length === 0 ? 'none' : plan.cautions.join(', ')}`,
    `never above ${ceilingsInWords(plan.ceilings)}`,
    ...sourceInWords(plan),
    `about ${spokenTime(Math.ceil(secondsLeft(plan, done)))} in all; nothing was touched`,
    '',
  ].join('\n');
}

function ceilingsInWords({ current, voltage, power, temperature }: Ceilings): string {
  const said = (ceiling: Ceiling, dimension: Dimension): string =>
    `${ceilingText(ceiling, dimension)} (${ceiling.setBy})`;
  const always = [said(current, 'current'), said(voltage, 'voltage'), said(power, 'power')];
  return [...always, ...(temperature === undefined ? [] : [said(temperature, 'temperature')])].join(', ');
}

function sourceInWords({ bench: { instruments } }: Plan): readonly string[] {
  const { source } = instruments;
  if (source === undefined) return [];
  const off = formatQuantity(source.offFor, 'time');
  return [`fed by the source: ${feedInWords(source)}; off for ${off} to clear a latch`];
}

/** What is left when the first steps are done. */
function secondsLeft({ steps }: Plan, done: number): Seconds {
  return steps.slice(done).reduce((sum, { duration }) => sum + duration, 0);
}

function underTestInWords({ underTest: { circuit, name } }: Plan): string {
  return circuit === 'single' ? `module ${name}` : `modules ${name} in ${circuit}`;
}

/** The same for a program; times in seconds, ceilings and what the source gives in A, V, W and °C. */
export function planAsJson(plan: Plan, done = 0): PlanJson {
  const { source } = plan.bench.instruments;
  return {
    format: 'railproof/plan 1',
    procedure: plan.procedure.name,
    module: plan.underTest.name,
    circuit: plan.underTest.circuit,
    bench: plan.bench.name,
    steps: plan.steps.map(({ kind, summary, duration }, index) => ({
      kind: kind.kind,
      summary,
      seconds: duration,
      ...(done === 0 ? {} : { done: index < done }),
    })),
    wiring: plan.procedure.wiring,
    cautions: plan.cautions,
    ceilings: plan.ceilings,
    ...(source === undefined
      ? {}
      : { source: { voltage: source.voltage, current: source.current, offFor: source.offFor } }),
    seconds: secondsLeft(plan, done),
  };
}
