import { type Content, element, type Markup } from '../page/markup.js';
import { type Axis, axisOf, type AxisWish } from './axis.js';
import { lineHeight, textWidth } from './text-width.js';

/** What every chart says of itself. The id is the page's own, and is in no other chart of it. */
export interface ChartWords {
  readonly id: string;
  readonly title: string;
  /** What can be read off it, for those who can't see it. */
  readonly description: string;
}

/** Where things lie in a chart, in units of the drawing. */
export interface Frame {
  readonly width: number;
  readonly height: number;
  readonly x: Axis;
  readonly y: Axis;
}

/** Of every chart, in units of the drawing. */
export const chartWidth = 560;
/** Of what lies between the axes, unless it is to be another. */
const usualHeight = 240;
const ticksBelow = 22;

/**
 * Lays the axes so that their numbers, what stands above, the names at the right and the ribbons below have
 * room.
 */
export function frameOf(
  wish: { readonly x: AxisWish; readonly y: AxisWish },
  room: {
    /** Known once it is known where the places of x are. */
    readonly above: (x: Axis, width: number) => number;
    readonly right: number;
    readonly below: number;
    /** Between the axes. */
    readonly height?: number;
    /** What the numbers at the left have at least, so that charts one below the other are in line. */
    readonly left?: number;
  },
): Frame {
  const ticks = axisOf(wish.y, [1, 0], 5).ticks;
  const left = Math.max(...ticks.map(({ text }) => textWidth(text) + 12), room.left ?? 12);
  const x = axisOf(wish.x, [left, chartWidth - Math.max(room.right, 14)], 7);
  const top = lineHeight + 10 + room.above(x, chartWidth);
  const bottom = top + (room.height ?? usualHeight);
  return {
    width: chartWidth,
    height: bottom + ticksBelow + lineHeight + 6 + room.below,
    x,
    y: axisOf(wish.y, [bottom, top], 5),
  };
}

/** The drawing with its names for those who can't see it, its grid and axes, and what is drawn between. */
export function framed(words: ChartWords, frame: Frame, ...drawn: readonly Content[]): Markup {
  const { id, title, description } = words;
  const { x, y } = frame;
  return element(
    'svg',
    {
      class: 'chart',
      viewBox: `0 0 ${frame.width} ${frame.height}`,
      role: 'img',
      'aria-labelledby': `${id}-title ${id}-desc`,
    },
    element('title', { id: `${id}-title` }, title),
    element('desc', { id: `${id}-desc` }, description),
    element(
      'clipPath',
      { id: `${id}-clip` },
      element('rect', { x: x.start, y: y.end, width: x.end - x.start, height: y.start - y.end }),
    ),
    element('path', { class: 'grid', d: grid(frame) }),
    drawn,
    element('path', { class: 'axis', d: `M${x.start} ${y.start}H${x.end}` }),
    x.ticks.map(({ value, text }) =>
      element('text', { class: 'tick', x: x.at(value), y: y.start + 17, 'text-anchor': 'middle' }, text),
    ),
    y.ticks.map(({ value, text }) =>
      element('text', { class: 'tick', x: x.start - 7, y: y.at(value) + 4, 'text-anchor': 'end' }, text),
    ),
    element('text', { class: 'unit', x: 0, y: lineHeight - 3 }, y.label),
    element(
      'text',
      { class: 'unit', x: x.end, y: y.start + ticksBelow + lineHeight - 2, 'text-anchor': 'end' },
      x.label,
    ),
  );
}

/** Only what lies between the axes. */
export function clipped({ id }: ChartWords, ...drawn: readonly Content[]): Markup {
  return element('g', { 'clip-path': `url(#${id}-clip)` }, drawn);
}

function grid({ x, y }: Frame): string {
  const across = y.ticks.map(({ value }) => `M${x.start} ${round(y.at(value))}H${round(x.end)}`);
  const ticks = x.ticks.map(({ value }) => `M${round(x.at(value))} ${y.start}v4`);
  return [...across, ...ticks].join('');
}

function round(value: number): number {
  return Math.round(value * 10) / 10;
}
