import type { Dimension } from '../../quantity/quantity.js';
import { element, type Markup, short } from '../page/markup.js';
import { type Axis, axisOf, domainOf } from './axis.js';
import { type ChartWords, type Frame, framed } from './frame.js';
import { roomForMarks, type VerticalMark, verticalMarks } from './marks.js';
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

const width = 560;
const barHeight = 14;
const left = 6;
/** Within a row, below its words; and below all of it. */
const [gap, below] = [4, 12];

interface Row extends Fall {
  readonly top: number;
  readonly lines: readonly string[];
}

export function fallingChart(chart: FallingChart): Markup {
  const { falls, marks = [] } = chart;
  const { to } = domainOf(
    [...falls.flatMap((fall) => [fall.from, fall.to]), ...marks.map(({ at }) => at)],
    0,
  );
  const x = axisOf({ ...chart.x, from: 0, to }, [left, width - 14], 8);
  const first = 8 + roomForMarks(marks, x, width);
  const rows: Row[] = [];
  let top = first;
  for (const fall of falls) {
    const lines = fall.because === '' ? [] : wrapToWidth(fall.because, width - left);
    rows.push({ ...fall, top, lines });
    top += lineHeight + gap + barHeight + lines.length * lineHeight + below;
  }
  const frame: Frame = {
    width,
    height: top + 22 + lineHeight + 6,
    x,
    y: { label: '', at: () => top, start: top, end: first, ticks: [] },
  };
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
  const shown = cutToWidth(name, Math.max(60, width - textWidth(says) - 20));
  return element(
    'g',
    { class: kind === 'whole' ? 's0' : 's1' },
    element('title', {}, `${name}: ${says}${because === '' ? '' : `; ${because}`}`),
    end - start < narrowest
      ? element('path', { class: 'whisker', d: `M${short(end)} ${short(top)}v${barHeight}` })
      : element('rect', { class: 'bar', x: start, y: top, width: end - start, height: barHeight }),
    element(
      'text',
      { class: 'halo', x: left, y: baseline },
      element('tspan', { class: 'name' }, shown),
      element('tspan', { dx: 8 }, says),
    ),
    lines.map((line, index) =>
      element(
        'text',
        { class: 'unit halo', x: left, y: top + barHeight + (index + 1) * lineHeight - 2 },
        line,
      ),
    ),
  );
}

/** What takes nothing away is a line and no bar. */
const narrowest = 1.5;
