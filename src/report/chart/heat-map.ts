import { scaleLinear } from 'd3-scale';
import type { Dimension } from '../../quantity/quantity.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import { element, type Markup, short } from '../page/markup.js';
import { contourNumbers, contoursOf } from './contours.js';
import { type ChartWords, clipped, type Frame, framed, frameOf } from './frame.js';
import { roomForMarks, type VerticalMark, verticalMarks } from './marks.js';

/** A quantity over two others: the darker the more, with contours that carry their numbers. */
export interface HeatMap extends ChartWords {
  readonly x: { readonly label: string; readonly dimension: Dimension; readonly values: readonly number[] };
  readonly y: { readonly label: string; readonly dimension: Dimension; readonly values: readonly number[] };
  readonly dimension: Dimension;
  /** By x, then by y, both rising; null where there is nothing. */
  readonly cells: readonly (readonly (number | null)[])[];
  readonly marks?: readonly VerticalMark[];
}

export function heatMap(map: HeatMap): Markup {
  const { x, y, cells, marks = [] } = map;
  const xs = edgesOf(x.values);
  const ys = edgesOf(y.values);
  const frame = frameOf(
    {
      x: { ...x, from: xs[0] ?? 0, to: xs.at(-1) ?? 1 },
      y: { ...y, from: ys[0] ?? 0, to: ys.at(-1) ?? 1 },
    },
    { above: (axis, width) => roomForMarks(marks, axis, width), right: 20, below: 0 },
  );
  const levels = levelsOf(cells);
  const contours = levels.map((level) => ({
    text: formatQuantity(level, map.dimension, { significant: 2 }),
    stretches: contoursOf({ xs: x.values, ys: y.values, cells }, level, frame),
  }));
  return framed(
    map,
    frame,
    clipped(
      map,
      // Laid one over the other: where more levels are passed it is darker.
      [...levels.map((level) => cellsFrom(level, cells, xs, ys, frame))].map((d) =>
        element('path', { class: 'heat', d }),
      ),
      element('path', {
        class: 'contour',
        d: contours
          .flatMap(({ stretches }) => stretches)
          .map(polyline)
          .join(''),
      }),
      element('path', { class: 'rim', d: rimOf(cells, xs, ys, frame) }),
    ),
    verticalMarks(marks, frame),
    contourNumbers(contours, frame),
  );
}

/** Round numbers from 0 to the greatest value, 0 itself left out: it is the bare paper. */
function levelsOf(cells: HeatMap['cells']): readonly number[] {
  const greatest = Math.max(0, ...cells.flatMap((column) => column.map((value) => value ?? 0)));
  return scaleLinear([0, greatest], [0, 1])
    .ticks(6)
    .filter((level) => level > 0);
}

/** Each value stands for what lies nearer to it than to its neighbours. */
function edgesOf(values: readonly number[]): readonly number[] {
  const middles = values.slice(1).map((value, index) => (value + (values[index] ?? value)) / 2);
  return [values[0] ?? 0, ...middles, values.at(-1) ?? 1];
}

/** All cells of the level or more, a column of them drawn as one. */
function cellsFrom(
  level: number,
  cells: HeatMap['cells'],
  xs: readonly number[],
  ys: readonly number[],
  frame: Frame,
): string {
  return cells
    .flatMap((column, index) => {
      const left = frame.x.at(xs[index] ?? 0);
      const width = frame.x.at(xs[index + 1] ?? 0) - left;
      return runsOf(column, (value) => value >= level).map(([first, last]) => {
        const bottom = frame.y.at(ys[first] ?? 0);
        const top = frame.y.at(ys[last + 1] ?? 0);
        return `M${short(left)} ${short(bottom)}h${short(width + 0.2)}V${short(top)}h${short(-width - 0.2)}z`;
      });
    })
    .join('');
}

function runsOf(column: readonly (number | null)[], holds: (value: number) => boolean): [number, number][] {
  return column.reduce<[number, number][]>((runs, value, index) => {
    if (value === null || !holds(value)) return runs;
    const run = runs.at(-1);
    if (run?.[1] === index - 1) run[1] = index;
    else runs.push([index, index]);
    return runs;
  }, []);
}

/** The upper end of what there is. */
function rimOf(cells: HeatMap['cells'], xs: readonly number[], ys: readonly number[], frame: Frame): string {
  const steps = cells.map((column, index) => {
    const top = column.findLastIndex((value) => value !== null) + 1;
    return `${short(frame.x.at(xs[index] ?? 0))} ${short(frame.y.at(ys[top] ?? 0))}H${short(frame.x.at(xs[index + 1] ?? 0))}`;
  });
  return steps.length === 0 ? '' : `M${steps.join('L')}`;
}

function polyline(places: readonly (readonly [number, number])[]): string {
  return `M${places.map(([x, y]) => `${short(x)} ${short(y)}`).join('L')}`;
}
