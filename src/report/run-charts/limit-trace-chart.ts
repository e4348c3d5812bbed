import { type CurveSeen, curveSeen } from '../../analysis/curve-seen.js';
import type { Evidence } from '../../analysis/evidence.js';
import { type Finding, findingNamed } from '../../analysis/finding.js';
import { overloadsOf } from '../../analysis/limit-style.js';
import type { LimitTrace, TracedAt } from '../../analysis/limit-trace.js';
import { capitalised } from '../../quantity/capitalised.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import type { Watts } from '../../quantity/quantity.js';
import { extremesOf } from '../chart/axis.js';
import type { ChartLine } from '../chart/drawn-line.js';
import type { VerticalMark } from '../chart/marks.js';
import { type ChartPoint, type Level, pointChart, type PointSort } from '../chart/point-chart.js';
import type { Markup } from '../page/markup.js';
import type { Result } from '../result.js';
import { figure } from '../page/figure.js';
import { heldInSearch } from './curve-points.js';
import { amps, foundInWords, volts } from './in-words.js';

/** A constant power is one within a tenth, from the lowest to the highest: half of it to each side. */
const side = 0.05;
const places = 61;
/** Of overloads alone there is little to see between no voltage and all of it. */
const flat = { height: 130, left: 12, right: 0 };

/**
 * V against I past the limit, at constant voltage and under the overloads of a search. Undefined where neither was
 * done.
 */
export function limitTraceFigure({ evidence, findings }: Result): Markup | undefined {
  if (!evidence.steps.some(({ kind }) => kind === 'limit-trace' || kind === 'dropout-search'))
    return undefined;
  const seen = curveSeen(evidence);
  const { trace } = seen;
  const sorts = [...tracedSorts(trace), overloaded(evidence)];
  const past = sorts.flatMap((sort) => sort.points);
  if (past.length === 0) return undefined;
  // Samples of an overload alone hang in the air: what was held before shows where they come from.
  const before = trace === undefined ? [heldInSearch(evidence)] : [];
  const points = [...past, ...before.flatMap((sort) => sort.points)];
  const [, most] = extremesOf(points.map(({ x }) => x));
  const style = findingNamed(findings, 'limit-style');
  const power = style?.value === 'constant-power' ? meanPower(trace) : undefined;
  const top = Math.max(seen.openCircuit ?? 0, extremesOf(points.map(({ y }) => y))[1]);
  const regulated = regulatedLine(seen, most);
  const title = style === undefined ? 'Past the limit' : `Past the limit: ${String(style.value)}`;
  return figure(
    title,
    pointChart({
      id: 'limit-trace',
      title,
      description: inWords(seen, findings, style, past.length),
      x: { label: 'Current', dimension: 'current', from: 0, to: Math.max(most * 1.05, 0.1) },
      y: { label: 'Voltage', dimension: 'voltage', from: 0, to: top * 1.04 },
      sorts: [...before, ...sorts],
      lines: [...regulated, ...(power === undefined ? [] : [hyperbola(power, top, most * 1.05)])],
      levels: regulated.length > 0 ? [] : openCircuit(seen),
      marks: shortCircuit(findings),
      ...(trace === undefined ? { size: flat } : {}),
    }),
    caption(style, power),
  );
}

function tracedSorts(trace: LimitTrace | undefined): readonly PointSort[] {
  const points = (wanted: (point: TracedAt) => boolean): readonly ChartPoint[] =>
    (trace?.points ?? [])
      .filter(wanted)
      .map((point) => ({ x: point.current, y: point.voltage, says: () => said(point, trace) }));
  return [
    {
      name: 'held at a voltage',
      shape: 'circle',
      look: 0,
      joined: true,
      points: points(({ gives }) => gives === 'all'),
    },
    {
      name: 'gave at times only',
      shape: 'triangle-down',
      look: 1,
      points: points(({ gives }) => gives === 'some'),
    },
    { name: 'gave nothing', shape: 'cross', look: 4, points: points(({ gives }) => gives === 'none') },
  ];
}

function said(
  { gives, voltage, current, samples, giving, isRegulated }: TracedAt,
  trace: LimitTrace | undefined,
): string {
  const step = trace === undefined ? '' : `; step ${trace.step}, limit-trace`;
  if (gives === 'none') return `held at ${volts(voltage)} it gave nothing, in ${samples} samples${step}`;
  if (gives === 'some') {
    return `held at ${volts(voltage)} it gave something in ${giving} of ${samples} samples, ${amps(current)} at most, and nothing in the others${step}`;
  }
  const where = isRegulated ? 'still regulated' : watts(voltage * current);
  return `${volts(voltage)} at ${amps(current)}, ${where}; ${samples} samples${step}`;
}

/** One by one: an average would hide a module that tries again and again. */
function overloaded({ steps }: Evidence): PointSort {
  const points = steps
    .filter(({ kind }) => kind === 'dropout-search')
    .flatMap((step) =>
      overloadsOf(step).flatMap(({ set, samples }) =>
        samples.map(({ voltage, current }): ChartPoint => ({
          x: current,
          y: voltage,
          says: () =>
            `${volts(voltage)} at ${amps(current)}, asked for ${amps(set)}; step ${step.step}, overload`,
        })),
      ),
    );
  return { name: 'samples under overload', shape: 'dot', look: 2, points };
}

/** V0 − R·I as far as anything flowed. */
function regulatedLine({ openCircuit, droop }: CurveSeen, most: number): readonly ChartLine[] {
  if (openCircuit === undefined || droop === undefined) return [];
  const xs = [0, most];
  return [{ name: 'regulated line', xs, ys: xs.map((current) => openCircuit - droop * current), look: 5 }];
}

function openCircuit({ openCircuit: at }: CurveSeen): readonly Level[] {
  return at === undefined ? [] : [{ at, name: `open ${formatQuantity(at, 'voltage', { significant: 3 })}` }];
}

function meanPower(trace: LimitTrace | undefined): Watts | undefined {
  const powers = (trace?.points ?? [])
    .filter(({ gives, isRegulated }) => gives === 'all' && !isRegulated)
    .map(({ voltage, current }) => voltage * current);
  return powers.length === 0 ? undefined : powers.reduce((sum, each) => sum + each, 0) / powers.length;
}

function hyperbola(power: Watts, top: number, most: number): ChartLine {
  const first = power / top;
  const xs = Array.from({ length: places }, (_, index) => first + ((most - first) * index) / (places - 1));
  const ys = xs.map((current) => power / current);
  return {
    name: `${watts(power)} ± 5 %`,
    xs,
    ys,
    band: { low: ys.map((each) => each * (1 - side)), high: ys.map((each) => each * (1 + side)) },
    look: 3,
  };
}

function shortCircuit(findings: readonly Finding[]): readonly VerticalMark[] {
  const finding = findingNamed(findings, 'short-circuit-current');
  if (finding === undefined || typeof finding.value !== 'number') return [];
  const { value, interval } = finding;
  const mark = { at: value, label: `into a short ${amps(value)}` };
  return [
    interval === null ? mark : { ...mark, between: { from: interval[0], to: interval[1], only: false } },
  ];
}

function inWords(
  { trace }: CurveSeen,
  findings: readonly Finding[],
  style: Finding | undefined,
  count: number,
): string {
  const short = findingNamed(findings, 'short-circuit-current');
  const limited = trace?.points.filter(({ isRegulated }) => !isRegulated) ?? [];
  const [highest] = limited;
  const lowest = limited.at(-1);
  const at = (point: TracedAt): string =>
    point.gives === 'all'
      ? amps(point.current)
      : point.gives === 'some'
        ? `up to ${amps(point.current)} at times`
        : 'nothing';
  return [
    style === undefined ? 'The style of the limit was not told.' : `${String(style.value)}: ${style.note}.`,
    ...(highest === undefined || lowest === undefined
      ? []
      : [
          `Held at ${volts(highest.voltage)} it gives ${at(highest)}, at ${volts(lowest.voltage)} ${at(lowest)}.`,
        ]),
    ...(short === undefined ? [] : [`Into a short: ${foundInWords(short)}.`]),
    `${count} points.`,
  ].join(' ');
}

function caption(style: Finding | undefined, power: Watts | undefined): string {
  const said =
    style === undefined
      ? 'What is drawn does not tell how it limits.'
      : `${capitalised(String(style.value))}: ${style.note}.`;
  const constant =
    power === undefined
      ? ''
      : ` The curve is a constant ${watts(power)}; what stays in the shaded band round it counts as constant.`;
  return `${said}${constant}`;
}

function watts(value: Watts): string {
  return formatQuantity(value, 'power', { significant: 3 });
}
