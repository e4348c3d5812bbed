import type { Dimension } from '../../quantity/quantity.js';
import { element, type Markup, short } from '../page/markup.js';
import { type AxisWish, domainOf, extremesOf } from './axis.js';
import { type ChartLine, drawnBand, drawnLine, lookClass, looked, type LookedLine } from './drawn-line.js';
import { endNames, endOf, roomForNames } from './end-names.js';
import { chartWidth, type ChartWords, clipped, type Frame, framed, frameOf } from './frame.js';
import { markBands, roomForMarks, type VerticalMark, verticalMarks } from './marks.js';
import { namesAtEnds } from './names-at-ends.js';
import { drawnKey, drawnShape, type KeyEntry, roomForKey, type Shape } from './shapes.js';
import { thinned } from './thinned.js';
import { roomForTurns, turnLines, type TurnRow, turnRows } from './turn-rows.js';

/** Measured points, with what was laid through them, levels and places worth knowing, and a key of the shapes. */
export interface PointChart extends ChartWords {
  readonly x: PointAxis;
  readonly y: PointAxis;
  readonly sorts: readonly PointSort[];
  readonly lines?: readonly ChartLine[];
  readonly levels?: readonly Level[];
  readonly marks?: readonly VerticalMark[];
  readonly whiskers?: readonly Whisker[];
  /** Below the plot. */
  readonly turns?: readonly TurnRow[];
  /** Where the names of the lines stand: in the key where left out, within the plot, or at its right. */
  readonly names?: 'key' | 'at-ends' | 'beside';
  /** Of the plot, and what is left and right of it at least, where charts stand one below the other. */
  readonly size?: { readonly height: number; readonly left: number; readonly right: number };
}

export interface PointAxis {
  readonly label: string;
  readonly dimension: Dimension;
  /** By what is drawn where left out. */
  readonly from?: number;
  readonly to?: number;
}

/** Points that are drawn alike. What lies beyond the axis of y is drawn at its edge. */
export interface PointSort {
  /** For the key. */
  readonly name: string;
  readonly shape: Shape;
  readonly look: number;
  readonly points: readonly ChartPoint[];
  /** How many were measured, where some of these stand for several. */
  readonly all?: number;
  /** Whether they are joined in their order. */
  readonly joined?: boolean;
}

export interface ChartPoint {
  readonly x: number;
  readonly y: number;
  /** When pointed at; made for those only that are drawn, as all that follows. */
  readonly says: () => string;
  /** What it lies between with 95 %. */
  readonly between?: () => readonly [low: number, high: number];
}

/** A horizontal line over the whole width, its name at the right. */
export interface Level {
  readonly at: number;
  readonly name: string;
}

/** What something lies between, at one place of x. */
export interface Whisker {
  readonly x: number;
  readonly low: number;
  readonly high: number;
  readonly look: number;
  readonly says: string;
}

/** Of all sorts together: with their words some fifty kilobytes. */
const mostPoints = 300;

export function pointChart(chart: PointChart): Markup {
  const { marks = [], levels = [], whiskers = [], turns = [], names = 'key' } = chart;
  const lines = looked(chart.lines ?? []);
  const sorts = drawnOf(chart.sorts);
  const key = [...sorts.map(keyEntry), ...(names === 'key' ? lines.map(lineEntry) : [])];
  const beside = names === 'beside' ? lines : [];
  const { right = 0, ...size } = chart.size ?? {};
  const frame = frameOf(axesOf({ ...chart, sorts }), {
    above: (x, width) => roomForMarks(marks, x, width),
    right: Math.max(right, roomForNames([...levels, ...beside].map(({ name }) => name))),
    below: roomForTurns(turns) + roomForKey(key, chartWidth),
    ...size,
  });
  const isBehind = ({ shape }: PointSort): boolean => shape === 'dot';
  return framed(
    chart,
    frame,
    markBands(marks, frame),
    turnLines(turns, frame),
    clipped(
      chart,
      lines.map((line) => drawnBand(line, frame)),
      levels.map(({ at }) => levelLine(at, frame)),
    ),
    verticalMarks(marks, frame),
    // Many small ones would hide the line that goes through them.
    sorts.filter(isBehind).map((sort) => drawnSort(sort, frame)),
    clipped(
      chart,
      sorts.map((sort) => joining(sort, frame)),
      lines.map((line) => drawnLine(line, frame)),
      sorts.map((sort) => drawnReaches(sort, frame)),
    ),
    whiskers.map((whisker) => drawnWhisker(whisker, frame)),
    sorts.filter((sort) => !isBehind(sort)).map((sort) => drawnSort(sort, frame)),
    names === 'at-ends' && namesAtEnds(lines, frame),
    endNames(
      [
        ...levels.map(({ at, name }) => ({ name, x: frame.x.end, y: frame.y.at(at), class: 'level' })),
        ...beside.map((line) => endOf(line, frame)),
      ],
      frame,
      marks.length > 0,
    ),
    turnRows(turns, frame.height - roomForKey(key, chartWidth) - roomForTurns(turns), frame),
    drawnKey(key, frame),
  );
}

interface DrawnSort extends PointSort {
  /** How many there were before they were thinned. */
  readonly all: number;
}

/** Few enough of all sorts together, each sort's peaks among them; a sort of few points whole. */
function drawnOf(sorts: readonly PointSort[]): readonly DrawnSort[] {
  const filled = sorts.filter(({ points }) => points.length > 0);
  const [from, to] = extremesOf(filled.flatMap(({ points }) => points.map(({ x }) => x)));
  const stretches = Math.floor(mostPoints / 2 / Math.max(1, filled.length));
  return filled
    .map((sort) => ({
      ...sort,
      points: thinned(sort.points, stretches, [from, to]),
      all: sort.all ?? sort.points.length,
    }))
    .filter(({ points }) => points.length > 0);
}

function keyEntry({ name, shape, look, points, all }: DrawnSort): KeyEntry {
  const some = points.length < all ? `, ${points.length} of ${all} drawn` : '';
  return { shape, look, says: `${name}${some}` };
}

function lineEntry({ name, look }: LookedLine): KeyEntry {
  return { shape: 'line', look, says: name };
}

function axesOf({ x, y, sorts, lines = [], levels = [], whiskers = [] }: PointChart): {
  readonly x: AxisWish;
  readonly y: AxisWish;
} {
  const points = sorts.flatMap((sort) => sort.points);
  const [left, right] = extremesOf([
    ...points.map((point) => point.x),
    ...lines.flatMap(({ xs }) => xs),
    ...whiskers.map((whisker) => whisker.x),
  ]);
  const across = left <= right ? { from: left, to: right } : { from: 0, to: 1 };
  const from = x.from ?? across.from;
  const to = Math.max(x.to ?? across.to, from);
  const up = domainOf(
    [
      ...points.flatMap(({ y: value, between }) => [value, ...(between?.() ?? [])]),
      ...lines.flatMap(({ ys, band }) => [...ys, ...(band?.low ?? []), ...(band?.high ?? [])]),
      ...levels.map(({ at }) => at),
      ...whiskers.flatMap(({ low, high }) => [low, high]),
    ],
    y.from,
  );
  return {
    x: { ...x, from, to: to > from ? to : from + 1 },
    y: { ...y, ...up, ...(y.to === undefined ? { round: true } : { to: y.to }) },
  };
}

function levelLine(at: number, { x, y }: Frame): Markup {
  const place = y.at(at);
  return element('line', { class: 'mark', x1: x.start, x2: x.end, y1: place, y2: place });
}

function joining({ look, points, joined = false }: PointSort, frame: Frame): Markup | undefined {
  if (!joined) return undefined;
  const places = points.map((point) => placeOf(point, frame)).map(([x, y]) => `${short(x)} ${short(y)}`);
  return element(
    'g',
    { class: lookClass(look) },
    element('path', { class: 'joining', d: `M${places.join('L')}` }),
  );
}

function drawnSort({ shape, look, points }: PointSort, frame: Frame): Markup {
  return element(
    'g',
    { class: lookClass(look) },
    points.map((point) => drawnShape(shape, placeOf(point, frame), point.says())),
  );
}

/** Of all points of a sort in one path; a point says itself what it lies between. */
function drawnReaches({ look, points }: PointSort, { x, y }: Frame): Markup | undefined {
  const reaches = points.flatMap(({ x: at, between }) => {
    const [low, high] = between?.() ?? [];
    if (low === undefined || high === undefined) return [];
    return [`M${short(x.at(at) - 3)} ${short(y.at(high))}h6m-3 0V${short(y.at(low))}m-3 0h6`];
  });
  if (reaches.length === 0) return undefined;
  return element('g', { class: lookClass(look) }, element('path', { class: 'reach', d: reaches.join('') }));
}

function placeOf({ x, y }: ChartPoint, frame: Frame): readonly [number, number] {
  const place = Number.isFinite(y) ? frame.y.at(y) : y > 0 ? frame.y.end : frame.y.start;
  return [frame.x.at(x), Math.min(frame.y.start, Math.max(frame.y.end, place))];
}

function drawnWhisker({ x, low, high, look, says }: Whisker, frame: Frame): Markup {
  const place = frame.x.at(x);
  const [bottom, top] = [frame.y.at(low), frame.y.at(high)];
  return element(
    'g',
    { class: lookClass(look) },
    element(
      'path',
      {
        class: 'whisker',
        d: `M${short(place - 5)} ${short(top)}h10m-5 0V${short(bottom)}m-5 0h10`,
      },
      element('title', {}, says),
    ),
  );
}
