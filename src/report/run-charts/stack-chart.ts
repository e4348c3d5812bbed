import type { StackLook } from '../../analysis/module-voltages.js';
import { isComplete } from '../../analysis/place-looks.js';
import {
  askedOf,
  heightsThere,
  type StackSeen,
  stackSeen,
  touchable,
  voltagesThere,
} from '../../analysis/stack-seen.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import type { Volts } from '../../quantity/quantity.js';
import type { RunHeader } from '../../record/run-header.js';
import { extremesOf } from '../chart/axis.js';
import type { VerticalMark } from '../chart/marks.js';
import { type ChartPoint, pointChart, type PointSort } from '../chart/point-chart.js';
import { weakestInWords } from '../group-answer.js';
import type { Markup } from '../page/markup.js';
import type { Result } from '../result.js';
import { figure } from '../sheet/figure.js';
import { amps, stepInWords, volts } from './in-words.js';
import { lineThrough, memberLook } from './member-look.js';

const title = 'Voltages in the string';
/** From so much of what may be touched on it is shown. */
const comesNear = 0.7;
/** Of the highest: what reads a little below zero does not stretch the axis. */
const noticeable = 0.01;
const sumLook = 5;
const droppedLook = 4;

/** What is drawn of a member, or of all of them together. */
interface Series {
  readonly name: string;
  readonly sort: Pick<PointSort, 'shape' | 'look'>;
  readonly held: readonly ChartPoint[];
  readonly dropped: readonly ChartPoint[];
}

/**
 * The voltage of each member of a string over its current, and their sum; whose goes first, and who is driven below
 * zero. Undefined where nothing was stacked.
 */
export function stackFigure(result: Result): Markup | undefined {
  const { evidence, header } = result;
  const seen = stackSeen(evidence);
  if (seen === undefined) return undefined;
  const series = [
    ...header.modules.map(({ name }, place) => member(header, seen, name, place)),
    sum(header, seen),
  ];
  const points = series.flatMap(({ held, dropped }) => [...held, ...dropped]);
  if (points.length === 0) return undefined;
  const [, most] = extremesOf(points.map(({ x }) => x));
  const [lowest, highest] = extremesOf(points.map(({ y }) => y));
  const goesBelow = lowest < -noticeable * highest;
  return figure(
    title,
    pointChart({
      id: 'stack',
      title,
      description: inWords(result, seen),
      x: { label: 'Current of the string', dimension: 'current', from: 0, to: Math.max(most * 1.03, 0.1) },
      y: { label: 'Voltage', dimension: 'voltage', ...(goesBelow ? {} : { from: 0, to: highest * 1.06 }) },
      sorts: sortsOf(series),
      lines: series.map(({ name, sort, held, dropped }) =>
        lineThrough(name, rising([...held, ...dropped]), sort.look),
      ),
      levels: [
        ...(goesBelow ? [{ at: 0, name: '0 V' }] : []),
        ...(highest < comesNear * touchable ? [] : [{ at: touchable, name: `${touchable} V, touchable` }]),
      ],
      marks: marksOf(seen),
      names: 'beside',
    }),
    caption(result, seen),
  );
}

function member(header: RunHeader, { climb }: StackSeen, name: string, place: number): Series {
  const at = (look: StackLook): readonly ChartPoint[] => {
    const there = voltagesThere(header, look).find(({ module }) => module === name);
    if (there === undefined) return [];
    const { volts: own, expanded } = there;
    return [pointOf(look, own, expanded, `${name} ${volts(own)} ± ${plusMinus(expanded)}`)];
  };
  return { name, sort: memberLook(place), ...heldOrNot(climb, at) };
}

/** At the terminals of the whole, by the modules' own voltages: what is in series with each is taken off. */
function sum(header: RunHeader, { climb }: StackSeen): Series {
  const at = (look: StackLook): readonly ChartPoint[] => {
    const top = heightsThere(header, look).at(-1);
    if (top === undefined || !isComplete(look, header)) return [];
    const words = `the sum ${volts(top.top)} ± ${plusMinus(top.expanded)}, read at the output ${volts(look.output)}`;
    return [pointOf(look, top.top, top.expanded, words)];
  };
  return { name: 'the sum', sort: { shape: 'square', look: sumLook }, ...heldOrNot(climb, at) };
}

function heldOrNot(
  climb: readonly StackLook[],
  at: (look: StackLook) => readonly ChartPoint[],
): Pick<Series, 'held' | 'dropped'> {
  const isDropped = ({ outcome }: StackLook): boolean => outcome === 'dropped';
  return {
    held: climb.filter((look) => !isDropped(look)).flatMap(at),
    dropped: climb.filter(isDropped).flatMap(at),
  };
}

function pointOf(look: StackLook, y: Volts, expanded: Volts, words: string): ChartPoint {
  const { outcome, step } = look;
  const asked = amps(askedOf(look));
  return {
    x: askedOf(look),
    y,
    between: () => [y - expanded, y + expanded],
    says: () =>
      `${words}, ${outcome === 'dropped' ? `dropped out when ${asked} were asked for` : `at ${asked}`}; ` +
      stepInWords({ step, kind: 'stack-check' }),
  };
}

function sortsOf(series: readonly Series[]): readonly PointSort[] {
  return [
    ...series.map(({ name, sort, held }) => ({ name, ...sort, points: held })),
    {
      name: 'dropped out, at what was asked for',
      shape: 'cross',
      look: droppedLook,
      points: series.flatMap(({ dropped }) => dropped),
    },
  ];
}

function rising(points: readonly ChartPoint[]): readonly ChartPoint[] {
  return [...points].sort((one, other) => one.x - other.x);
}

function marksOf({ climb, collapse }: StackSeen): readonly VerticalMark[] {
  if (collapse === undefined) {
    const dropped = climb.find(({ outcome }) => outcome === 'dropped');
    return dropped === undefined
      ? []
      : [{ at: askedOf(dropped), label: `dropped out at ${amps(askedOf(dropped))}` }];
  }
  const { at, held, module } = collapse;
  const mark = { at, label: `${module} collapses at ${amps(at)}` };
  return [held === undefined ? mark : { ...mark, between: { from: held, to: at, only: false } }];
}

function inWords({ findings, header }: Result, seen: StackSeen): string {
  const held = seen.climb.findLast((look) => look.outcome !== 'dropped' && isComplete(look, header));
  const each = held?.modules.map((one) => `${one.module} ${volts(one.volts)}`) ?? [];
  const together = held === undefined ? undefined : heightsThere(header, held).at(-1)?.top;
  return [
    `${seen.climb.length} points.`,
    ...(held === undefined || together === undefined
      ? []
      : [`At ${amps(askedOf(held))}: ${each.join(', ')}, together ${volts(together)}.`]),
    ...weakestInWords(findings),
    ...reversedInWords(seen),
  ].join(' ');
}

function caption({ findings }: Result, seen: StackSeen): string {
  const { wrong } = seen;
  return [
    ...(wrong === undefined
      ? weakestInWords(findings)
      : [
          `THEY DO NOT ADD UP: at ${amps(wrong.look.current)} the sum is ${volts(wrong.sum)} and the output gives ` +
            `${volts(wrong.look.output)}, so nothing is told by them.`,
        ]),
    ...reversedInWords(seen),
    'The bars hold each voltage with 95 %; of most they are smaller than the mark.',
  ].join(' ');
}

function reversedInWords({ reversed }: StackSeen): readonly string[] {
  return reversed.map(
    ({ module, volts: lowest, at }) =>
      `${module} was driven below zero by the others: ${volts(lowest)} when ${amps(at)} were asked for.`,
  );
}

function plusMinus(expanded: Volts): string {
  return formatQuantity(expanded, 'voltage', { significant: 2 });
}
