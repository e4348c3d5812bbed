import type { Dimension } from '../../quantity/quantity.js';
import { element, type Markup, short } from '../page/markup.js';
import type { Axis } from './axis.js';
import { type ChartWords, framed } from './frame.js';
import { type VerticalMark, verticalMarks } from './marks.js';
import { barHeight, rowsFrame, rowsLeft, rowsWidth } from './rows-frame.js';
import { cutToWidth, lineHeight, textWidth, wrapToWidth } from './text-width.js';

/** A value that steps bring down one after the other: each begins where the one before it ended. */
export interface FallingChart extends ChartWords {
  readonly x: { readonly label: string; readonly dimension: Dimension };
  readonly falls: readonly Fall[];
  readonly marks?: readonly VerticalMark[];
}

export interface Fall {
  readonly name: string;
  /** What it does, in a word or two: `× 0.8, leaves 4.20 A`. */
  readonly says: string;
  /** Below the bar, in as many lines as it takes. */
  readonly because: string;
  /** From what it was to what it is; `whole`: stands on the axis, for what is there before and after all steps. */
  readonly from: number;
  readonly to: number;
  readonly kind: 'step' | 'whole';
}

/** Within a row, below its words; and below all of it. */
const [gap, below] = [4, 12];

/** What takes nothing away is a line and no bar. */
const narrowest = 1.5;

interface Row extends Fall {
  readonly top: number;
  readonly lines: readonly string[];
}

export function fallingChart(chart: FallingChart): Markup {
  const { falls, marks = [] } = chart;
  const rows: Row[] = [];
  const laid = (first: number): number =>
    falls.reduce((top, fall) => {
      const lines = fall.because === '' ? [] : wrapToWidth(fall.because, rowsWidth - rowsLeft);
      rows.push({ ...fall, top, lines });
      return top + lineHeight + gap + barHeight + lines.length * lineHeight + below;
    }, first);
  const values = falls.flatMap((fall) => [fall.from, fall.to]);
  const frame = rowsFrame(chart.x, values, marks, laid);
  const { x } = frame;
  return framed(
    chart,
    frame,
    verticalMarks(marks, frame),
    rows.map((row, index) => dropLine(row, rows[index + 1], x)),
    rows.map((row) => drawn(row, x)),
  );
}

function barTop({ top }: Row): number {
  return top + lineHeight + gap;
}

/** From where a step ends down to where the next one begins. */
function dropLine(row: Row, next: Row | undefined, x: Axis): Markup | undefined {
  if (next === undefined) return undefined;
  const place = x.at(row.to);
  return element('line', {
    class: 'mark',
    x1: place,
    x2: place,
    y1: barTop(row),
    y2: barTop(next) + barHeight,
  });
}

function drawn(row: Row, x: Axis): Markup {
  const { name, says, because, from, to, kind, lines } = row;
  const [start, end] = kind === 'whole' ? [x.at(0), x.at(to)] : [x.at(to), x.at(from)];
  const top = barTop(row);
  const baseline = row.top + lineHeight;
  const shown = cutToWidth(name, Math.max(60, rowsWidth - textWidth(says) - 20));
  return element(
    'g',
    { class: kind === 'whole' ? 's0' : 's1' },
    element('title', {}, `${name}: ${says}${because === '' ? '' : `; ${because}`}`),
    end - start < narrowest
      ? element('path', { class: 'whisker', d: `M${short(end)} ${short(top)}v${barHeight}` })
      : element('rect', { class: 'bar', x: start, y: top, width: end - start, height: barHeight }),
    element(
      'text',
      { class: 'halo', x: rowsLeft, y: baseline },
      element('tspan', { class: 'name' }, shown),
      element('tspan', { dx: 8 }, says),
    ),
    lines.map((line, index) =>
      element(
        'text',
        { class: 'unit halo', x: rowsLeft, y: top + barHeight + (index + 1) * lineHeight - 2 },
        line,
      ),
    ),
  );
}
