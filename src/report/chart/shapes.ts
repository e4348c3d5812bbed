import { element, type Markup, short } from '../page/markup.js';
import { lookClass } from './drawn-line.js';
import type { Frame } from './frame.js';
import { cutToWidth, lineHeight, textWidth } from './text-width.js';

/** What points are drawn as, so that their shape tells them apart without their colour. */
export type Shape = keyof typeof outlines;

/** Each round its place, in units of the drawing. */
const outlines = {
  circle: 'm-3.5 0a3.5 3.5 0 1 0 7 0a3.5 3.5 0 1 0-7 0z',
  'triangle-down': 'm0 5l-4.6-8h9.2z',
  'triangle-up': 'm0-5l-4.6 8h9.2z',
  hexagon: 'm-4.6 0l2.3-4h4.6l2.3 4-2.3 4h-4.6z',
  diamond: 'm0-5.2l5.2 5.2-5.2 5.2-5.2-5.2z',
  square: 'm-3.8-3.8h7.6v7.6h-7.6z',
  plus: 'm-5.5 0h11m-5.5-5.5v11',
  cross: 'm-4.2-4.2l8.4 8.4m0-8.4l-8.4 8.4',
  /** Stands at the lower edge: further down than the chart goes. */
  arrow: 'm0-13v12m-4.5-5l4.5 5 4.5-5',
  dot: 'm-1.6 0a1.6 1.6 0 1 0 3.2 0a1.6 1.6 0 1 0-3.2 0z',
} as const;

export function drawnShape(shape: Shape, [x, y]: readonly [number, number], says?: string): Markup {
  return element(
    'path',
    { class: 'shape', 'data-of': shape, d: `M${short(x)} ${short(y)}${outlines[shape]}` },
    says !== undefined && element('title', {}, says),
  );
}

/** What a shape, or a line of such a look, stands for. */
export interface KeyEntry {
  readonly shape: Shape | 'line';
  readonly look: number;
  readonly says: string;
}

const left = 6;
/** From a shape's middle to its words. */
const gap = 12;
/** How long the sample of a line is, and how far its words are from its beginning. */
const sample = 30;
const next = 20;

interface Placed extends KeyEntry {
  readonly text: string;
  readonly x: number;
  readonly row: number;
}

export function roomForKey(entries: readonly KeyEntry[], width: number): number {
  const last = placed(entries, width).at(-1);
  return last === undefined ? 0 : (last.row + 1) * (lineHeight + 2) + 6;
}

/** Below all else, as many in a row as there is room for. */
export function drawnKey(entries: readonly KeyEntry[], { width, height }: Frame): readonly Markup[] {
  const top = height - roomForKey(entries, width);
  return placed(entries, width).map(({ shape, look, text, x, row }) => {
    const baseline = top + (row + 1) * (lineHeight + 2);
    const drawn =
      shape === 'line'
        ? element('path', { class: 'line', d: `M${short(x - left)} ${short(baseline - 4.5)}h${sample}` })
        : // An arrow stands upon its place, all others round it.
          drawnShape(shape, [x, baseline - (shape === 'arrow' ? -2 : 4.5)]);
    return element(
      'g',
      { class: lookClass(look) },
      drawn,
      element('text', { x: x + before(shape), y: baseline }, text),
    );
  });
}

function placed(entries: readonly KeyEntry[], width: number): readonly Placed[] {
  let x = left;
  let row = 0;
  return entries.map((entry) => {
    const text = cutToWidth(entry.says, width - left - before(entry.shape));
    const wide = before(entry.shape) + textWidth(text);
    if (x > left && x + wide > width) {
      x = left;
      row += 1;
    }
    const place = { ...entry, text, x, row };
    x += wide + next;
    return place;
  });
}

function before(shape: KeyEntry['shape']): number {
  return shape === 'line' ? sample : gap;
}
