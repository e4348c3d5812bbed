import type { Dimension } from '../../quantity/quantity.js';
import { element, type Markup, short } from '../page/markup.js';
import { axisOf, domainOf } from './axis.js';
import { lookClass } from './drawn-line.js';
import { type ChartWords, type Frame, framed } from './frame.js';
import { rowsLeft, rowsWidth } from './rows-frame.js';
import { drawnKey, drawnShape, type KeyEntry, roomForKey, type Shape } from './shapes.js';
import { shiftArrow } from './shift-arrow.js';
import { cutToWidth, lineHeight, textWidth } from './text-width.js';

/** Values with what they lie between, a row each on one axis: the name at the left, what it says at the right. */
export interface SpanRows extends ChartWords {
  readonly x: {
    readonly label: string;
    readonly dimension: Dimension;
    /** By what is drawn where left out. */
    readonly from?: number;
    readonly to?: number;
  };
  readonly rows: readonly SpanRow[];
  /** A stretch in which values may be. */
  readonly band?: { readonly from: number; readonly to: number; readonly says: string };
  /** A place worth knowing, all through the rows. */
  readonly line?: number;
  readonly shifts?: readonly RowShift[];
  /** What the words at the right have at least, so that charts one below the other are in line. */
  readonly roomForWords?: number;
  readonly key?: readonly KeyEntry[];
}

export interface SpanRow {
  readonly name: string;
  readonly says: string;
  /** When pointed at. */
  readonly more: string;
  readonly value: number;
  /** Undefined where nothing is known of it. */
  readonly between?: readonly [low: number, high: number] | undefined;
  /** Whether the value may be more. */
  readonly isLeast?: boolean;
  readonly shape: Shape;
  readonly look: number;
}

/** That a value moved: from a row to a row, or within one. */
export interface RowShift {
  readonly from: { readonly row: number; readonly value: number };
  readonly to: { readonly row: number; readonly value: number };
  readonly says: string;
}

const rowHeight = 28;
const longestName = 200;
const longestWords = 190;

export function spanRows(chart: SpanRows): Markup {
  const { rows, key = [], band, line } = chart;
  const frame = rowsFrameOf(chart, roomForKey(key, rowsWidth));
  const middleOf = (row: number): number => frame.y.end + (row + 0.5) * rowHeight;
  return framed(
    chart,
    frame,
    band !== undefined && bandOf(band, frame),
    line !== undefined && lineOf(line, frame),
    rows.map((row, index) => drawnRow(row, middleOf(index), frame)),
    chart.shifts?.map(({ from, to, says }) =>
      shiftArrow(
        [within(from.value, frame), middleOf(from.row)],
        [within(to.value, frame), middleOf(to.row)],
        says,
      ),
    ),
    drawnKey(key, frame),
  );
}

function rowsFrameOf({ x, rows, band, roomForWords = 0 }: SpanRows, below: number): Frame {
  const names = Math.max(...rows.map(({ name }) => textWidth(cutToWidth(name, longestName))));
  const words = Math.max(...rows.map(({ says }) => textWidth(cutToWidth(says, longestWords))), roomForWords);
  const values = rows.flatMap(({ value, between }) => [value, ...(between ?? [])]);
  const domain = domainOf([...values, ...(band === undefined ? [] : [band.from, band.to])]);
  const [left, right] = [rowsLeft + names + 18, rowsWidth - words - 18];
  const axis = axisOf(
    { ...x, from: x.from ?? domain.from, to: x.to ?? domain.to },
    [left, right],
    Math.max(2, Math.floor((right - left) / 70)),
  );
  const top = 6;
  const bottom = top + rows.length * rowHeight;
  return {
    width: rowsWidth,
    height: bottom + 22 + lineHeight + 6 + below,
    x: axis,
    y: { label: '', at: () => bottom, start: bottom, end: top, ticks: [] },
  };
}

function bandOf({ from, to, says }: NonNullable<SpanRows['band']>, frame: Frame): Markup {
  const [start, end] = [within(from, frame), within(to, frame)];
  return element(
    'rect',
    { class: 'between', x: start, y: frame.y.end, width: end - start, height: frame.y.start - frame.y.end },
    element('title', {}, says),
  );
}

function lineOf(value: number, { x, y }: Frame): Markup {
  return element('line', { class: 'mark', x1: x.at(value), x2: x.at(value), y1: y.end, y2: y.start });
}

/** What lies beyond the axis stands at its end, and an arrow says that it is further on. */
function drawnRow(row: SpanRow, middle: number, frame: Frame): Markup {
  const { name, says, more, value, between, shape, look, isLeast = false } = row;
  const { x } = frame;
  const place = within(value, frame);
  const goesOn = x.at(value) > x.end + 0.5 || isLeast ? 1 : x.at(value) < x.start - 0.5 ? -1 : 0;
  return element(
    'g',
    { class: lookClass(look) },
    element('title', {}, more),
    element('text', { class: 'name', x: rowsLeft, y: middle + 4 }, cutToWidth(name, longestName)),
    between !== undefined && whisker(between, middle, frame),
    goesOn !== 0 &&
      element('path', {
        class: 'whisker',
        d: `M${short(place)} ${short(middle)}h${goesOn * 14}m${goesOn * -5} -4l${goesOn * 5} 4l${goesOn * -5} 4`,
      }),
    drawnShape(shape, [place, middle]),
    element('text', { x: x.end + 18, y: middle + 4 }, cutToWidth(says, longestWords)),
  );
}

function whisker(between: readonly [number, number], middle: number, frame: Frame): Markup {
  const [low, high] = between.map((end) => within(end, frame)) as [number, number];
  const cap = (at: number): string => `M${short(at)} ${short(middle - 5)}v10`;
  const { x } = frame;
  // An end that lies further out has no cap.
  const ends = between.filter((end) => x.at(end) >= x.start - 0.5 && x.at(end) <= x.end + 0.5);
  const caps = ends.map((end) => cap(x.at(end))).join('');
  return element('path', { class: 'whisker', d: `${caps}M${short(low)} ${short(middle)}H${short(high)}` });
}

function within(value: number, { x }: Frame): number {
  return Math.max(x.start, Math.min(x.end, x.at(value)));
}
