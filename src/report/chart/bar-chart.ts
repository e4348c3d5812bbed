import type { Dimension } from '../../quantity/quantity.js';
import { element, type Markup } from '../page/markup.js';
import { type ChartWords, type Frame, framed } from './frame.js';
import { type VerticalMark, verticalMarks } from './marks.js';
import { barHeight, rowsFrame, rowsWidth } from './rows-frame.js';
import { cutToWidth, lineHeight, textWidth } from './text-width.js';

/** One bar below the other, each from somewhere to somewhere on one axis, with its words above it. */
export interface BarChart extends ChartWords {
  readonly x: { readonly label: string; readonly dimension: Dimension };
  readonly bars: readonly Bar[];
  readonly marks?: readonly VerticalMark[];
}

export interface Bar {
  readonly from: number;
  readonly to: number;
  /** Whom it is of, and what it says. */
  readonly name: string;
  readonly says: string;
  /** Bars of one look belong together; 0 where left out. */
  readonly look?: number;
}

const rowHeight = barHeight + lineHeight + 10;

export function barChart(chart: BarChart): Markup {
  const { bars, marks = [] } = chart;
  const ends = bars.map((bar) => bar.to);
  const frame = rowsFrame(chart.x, ends, marks, (from) => from + bars.length * rowHeight + 4);
  const top = frame.y.end;
  return framed(
    chart,
    frame,
    verticalMarks(marks, frame),
    bars.map((bar, index) => drawn(bar, top + index * rowHeight, frame, marks.length > 0)),
  );
}

function drawn(
  { from, to, name, says, look = 0 }: Bar,
  top: number,
  { x }: Frame,
  isCrossed: boolean,
): Markup {
  const start = x.at(Math.min(from, to));
  const length = Math.max(2, x.at(Math.max(from, to)) - start);
  const shown = cutToWidth(name, Math.max(60, rowsWidth - textWidth(says) - 20));
  const whole = textWidth(shown) + 8 + textWidth(says);
  const place = Math.max(0, Math.min(start, rowsWidth - whole));
  return element(
    'g',
    { class: `s${look}` },
    element('title', {}, `${name}: ${says}`),
    element('rect', { class: 'bar', x: start, y: top + lineHeight + 4, width: length, height: barHeight }),
    element(
      'text',
      { class: isCrossed ? 'halo' : undefined, x: place, y: top + lineHeight },
      element('tspan', { class: 'name' }, shown),
      element('tspan', { dx: 8 }, says),
    ),
  );
}
