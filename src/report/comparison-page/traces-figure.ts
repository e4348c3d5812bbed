import { curveSeen } from '../../analysis/curve-seen.js';
import type { TracedAt } from '../../analysis/limit-trace.js';
import { capitalised } from '../../quantity/capitalised.js';
import { extremesOf } from '../chart/axis.js';
import { pointChart, type PointSort } from '../chart/point-chart.js';
import type { ComparedRecords } from '../comparison.js';
import type { Markup } from '../page/markup.js';
import { amps, volts } from '../run-charts/in-words.js';
import { figure } from '../page/figure.js';
import { hasMoved } from './compared-words.js';
import { bothInWords } from './movement-words.js';
import { bothSides, type PageSide, recordsShown } from './sides.js';
import { turnRow } from './turn-row.js';

/** What each gave while it was held at falling voltages; undefined where neither was. */
export function tracesFigure(records: ComparedRecords): Markup | undefined {
  const sides = bothSides(records);
  const { sameModules } = records.comparison;
  const sorts = sides.flatMap(tracedSorts);
  const short = records.comparison.findings.find(({ finding }) => finding === 'short-circuit-current');
  const turns = short === undefined ? [] : [turnRow('into a short', short, { sides, sameModules })];
  const points = sorts.flatMap((sort) => sort.points);
  if (points.length === 0) return undefined;
  const [, most] = extremesOf([
    ...points.map(({ x }) => x),
    ...turns.flatMap(({ places }) => places.map(({ at }) => at)),
  ]);
  const title = `Past the limit, ${recordsShown(sides.filter(isTraced))}`;
  const [, top] = extremesOf(points.map(({ y }) => y));
  const counted = sorts
    .filter((sort) => sort.points.length > 0)
    .map(({ name, points: { length } }) => `${length} points ${name}`);
  return figure(
    title,
    pointChart({
      id: 'traces',
      title,
      description: [`${counted.join(', ')}.`, ...turns.map(({ name }) => `${capitalised(name)}.`)].join(' '),
      x: { label: 'Current', dimension: 'current', from: 0, to: Math.max(most * 1.05, 0.1) },
      y: { label: 'Voltage', dimension: 'voltage', from: 0, to: top * 1.06 },
      sorts,
      turns,
    }),
    styleInWords(records),
  );
}

function isTraced({ result }: PageSide): boolean {
  return (curveSeen(result.evidence).trace?.points ?? []).length > 0;
}

function tracedSorts({ name, shape, look, result }: PageSide): readonly PointSort[] {
  const points = curveSeen(result.evidence).trace?.points ?? [];
  const of = (gives: boolean): PointSort['points'] =>
    points
      .filter((point) => (point.gives === 'all') === gives)
      .map((point) => ({ x: point.current, y: point.voltage, says: () => `${name}: ${said(point)}` }));
  return [
    { name: `held at a voltage, ${name}`, shape, look, joined: true, points: of(true) },
    {
      name: `gave nothing, or at times only, ${name}`,
      shape: look === 0 ? 'plus' : 'cross',
      look,
      points: of(false),
    },
  ];
}

function said({ gives, voltage, current }: TracedAt): string {
  const words = { all: 'it gave', some: 'at times only it gave up to', none: 'it gave nothing,' };
  return `held at ${volts(voltage)} ${words[gives]} ${amps(current)}`;
}

function styleInWords({ comparison: { findings, sameModules } }: ComparedRecords): string {
  const style = findings.find(({ finding }) => finding === 'limit-style');
  if (style === undefined) return 'The style of the limit was told of neither.';
  const both = bothInWords(style, sameModules);
  if (hasMoved(style)) return `The style of the limit ${sameModules ? 'changed ' : 'differs: '}${both}.`;
  const { before, after } = style;
  return before !== undefined && before.value === after?.value
    ? `The style of the limit is ${String(after.value)} in both.`
    : `The style of the limit: ${both}.`;
}
