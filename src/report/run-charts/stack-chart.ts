import type { Finding } from '../../analysis/finding.js';
import { type StackLook, sumUpTo } from '../../analysis/module-voltages.js';
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
import type { Amperes, Volts } from '../../quantity/quantity.js';
import type { RunHeader } from '../../record/run-header.js';
import { extremesOf } from '../chart/axis.js';
import type { ChartLine } from '../chart/drawn-line.js';
import type { VerticalMark } from '../chart/marks.js';
import { type ChartPoint, type PointAxis, pointChart, type PointSort } from '../chart/point-chart.js';
import { weakestInWords } from '../group-answer.js';
import { type Markup, together } from '../page/markup.js';
import type { Result } from '../result.js';
import { figure } from '../page/figure.js';
import { amps, stepInWords, volts } from './in-words.js';
import { lineThrough, memberLook, once } from './member-look.js';

const title = 'Voltages in the string';
/** From so much of what may be touched on it is shown. */
const comesNear = 0.7;
/** Of the highest: what reads a little below zero does not stretch the axis. */
const noticeable = 0.01;
const sumLook = 5;
const droppedLook = 4;
const whole = { height: 240, left: 66, right: 150 };
const small = { ...whole, height: 110 };

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
  const { evidence, findings, header } = result;
  const seen = stackSeen(evidence);
  if (seen === undefined || seen.climb.every(({ modules }) => modules.length === 0)) return undefined;
  const members = header.modules.map(({ name }, place) => member(header, seen, name, place));
  const [lowest, highest] = extremesOf(members.flatMap(drawnOf).map(({ y }) => y));
  const along = {
    label: 'Current of the string',
    dimension: 'current',
    from: 0,
    to: furthest(members),
  } as const;
  const goesBelow = lowest < -noticeable * highest;
  return figure(
    title,
    together(
      pointChart({
        id: 'stack',
        title,
        description: inWords(result, seen),
        x: along,
        y: {
          label: 'Voltage of each',
          dimension: 'voltage',
          ...(!goesBelow && lowest < highest / 2 ? { from: 0 } : {}),
        },
        sorts: sortsOf(members),
        lines: members.map(lineOf),
        levels: goesBelow ? [{ at: 0, name: '0 V' }] : [],
        marks: marksOf(seen),
        names: 'beside',
        size: whole,
      }),
      sumChart(header, seen, along),
    ),
    caption(seen, findings),
  );
}

function sumChart(header: RunHeader, seen: StackSeen, x: PointAxis): Markup | false {
  const series = sum(header, seen);
  const [, highest] = extremesOf(drawnOf(series).map(({ y }) => y));
  if (drawnOf(series).length === 0) return false;
  const wide = 'Sum of the voltages';
  return pointChart({
    id: 'stack-sum',
    title: wide,
    description: `${series.held.length} points held, up to ${volts(highest)}.`,
    x,
    y: { label: wide, dimension: 'voltage' },
    sorts: sortsOf([series]),
    lines: [lineOf(series)],
    levels: highest < comesNear * touchable ? [] : [{ at: touchable, name: `${touchable} V, touch limit` }],
    names: 'beside',
    size: small,
  });
}

function drawnOf({ held, dropped }: Series): readonly ChartPoint[] {
  return [...held, ...dropped];
}

function furthest(series: readonly Series[]): Amperes {
  const [, most] = extremesOf(series.flatMap(drawnOf).map(({ x }) => x));
  return Math.max(most * 1.03, 0.1);
}

/** Through what was held and on to what dropped out, so that it is seen whose that is. */
function lineOf({ name, sort, held, dropped }: Series): ChartLine {
  const rising = [...held, ...dropped].sort((one, other) => one.x - other.x);
  return lineThrough(name, rising, sort.look);
}

function member(header: RunHeader, { climb }: StackSeen, name: string, place: number): Series {
  const at = (look: StackLook): readonly ChartPoint[] => {
    const read = look.modules.find(({ module }) => module === name);
    if (read === undefined) return [];
    const expanded = once(
      () => voltagesThere(header, look).find(({ module }) => module === name)?.expanded ?? 0,
    );
    return [pointOf(look, read.volts, expanded, name)];
  };
  return { name, sort: memberLook(place), ...heldOrNot(climb, at) };
}

/** At the terminals of the whole, by the modules' own voltages: what is in series with each is taken off. */
function sum(header: RunHeader, { climb }: StackSeen): Series {
  const places = header.modules.length;
  const at = (look: StackLook): readonly ChartPoint[] => {
    if (!isComplete(look, header)) return [];
    const expanded = once(() => heightsThere(header, look).at(-1)?.expanded ?? 0);
    const read = `, read at the output ${volts(look.output)}`;
    return [pointOf(look, sumUpTo(look, places), expanded, 'the sum', read)];
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

function pointOf(look: StackLook, y: Volts, expanded: () => Volts, name: string, besides = ''): ChartPoint {
  const { outcome, step } = look;
  const asked = amps(askedOf(look));
  const where = outcome === 'dropped' ? `dropped out when ${asked} were asked for` : `at ${asked}`;
  return {
    x: askedOf(look),
    y,
    between: () => [y - expanded(), y + expanded()],
    says: () =>
      `${name} ${volts(y)} ± ${plusMinus(expanded())}${besides}, ${where}; ` +
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

function caption(seen: StackSeen, findings: readonly Finding[]): string {
  const { wrong } = seen;
  return [
    ...(wrong === undefined
      ? weakestInWords(findings)
      : [
          `THEY DO NOT ADD UP: at ${amps(wrong.look.current)} the sum is ${volts(wrong.sum)} and the output gives ` +
            `${volts(wrong.look.output)}, so nothing is told by them.`,
        ]),
    ...reversedInWords(seen),
    'The bars hold each voltage with 95 %; below, their sum.',
  ].join(' ');
}

function reversedInWords({ reversed }: StackSeen): readonly string[] {
  return reversed.map(
    ({ module, volts: lowest, at }) =>
      `${module} was driven below zero by the others: ${formatQuantity(lowest, 'voltage', { significant: 3 })} when ${amps(at)} were asked for.`,
  );
}

function plusMinus(expanded: Volts): string {
  return formatQuantity(expanded, 'voltage', { significant: 2 });
}
