import type { Dimension } from '../../quantity/quantity.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import { element, type Markup } from '../page/markup.js';
import { type AxisWish, domainOf } from './axis.js';
import { type ChartLine, drawnBand, drawnLine, lookClass, looked, type LookedLine } from './drawn-line.js';
import { endNames, endOf, roomForNames } from './end-names.js';
import { type ChartWords, clipped, type Frame, framed, frameOf } from './frame.js';
import { roomForMarks, type VerticalMark, verticalMarks } from './marks.js';
import { type Ribbon, ribbons, roomForRibbons } from './ribbons.js';

export type { ChartLine } from './drawn-line.js';

/** Lines over one axis, with what lies round them, marks at places of x and ribbons below. */
export interface LineChart extends ChartWords {
  readonly x: { readonly label: string; readonly dimension: Dimension };
  readonly y: {
    readonly label: string;
    readonly dimension: Dimension;
    /** Where the axis begins and ends; by the values where left out. */
    readonly from?: number;
    readonly to?: number;
  };
  readonly lines: readonly ChartLine[];
  readonly marks?: readonly VerticalMark[];
  readonly ribbons?: readonly Ribbon[];
}

export function lineChart(chart: LineChart): Markup {
  const { marks = [], ribbons: below = [] } = chart;
  const lines = looked(chart.lines);
  const frame = frameOf(axesOf(chart), {
    above: (x, width) => roomForMarks(marks, x, width),
    right: roomForNames(lines.map(({ name }) => name)),
    below: roomForRibbons(below),
  });
  return framed(
    chart,
    frame,
    clipped(
      chart,
      lines.map((line) => drawnBand(line, frame)),
    ),
    clipped(
      chart,
      lines.map((line) => drawnLine(line, frame)),
    ),
    verticalMarks(marks, frame),
    lines.map((line) => spotsOf(line, chart, frame)),
    endNames(
      lines.map((line) => endOf(line, frame)),
      frame,
    ),
    ribbons(below, frame),
  );
}

function axesOf({ x, y, lines }: LineChart): { readonly x: AxisWish; readonly y: AxisWish } {
  const xs = lines.flatMap((each) => each.xs);
  const ys = lines.flatMap(({ ys: own, band }) => [...own, ...(band?.low ?? []), ...(band?.high ?? [])]);
  const { from, to } = domainOf(ys, y.from);
  return {
    x: { ...x, from: Math.min(...xs), to: Math.max(...xs) },
    y: { ...y, from, to: y.to ?? to, round: y.to === undefined },
  };
}

/** Round spots along a line that say what it is there, when pointed at. */
function spotsOf({ name, xs, ys, band, look }: LookedLine, chart: LineChart, frame: Frame): Markup {
  const said = (value: number | undefined, dimension: Dimension): string =>
    formatQuantity(value ?? NaN, dimension, { significant: 4 });
  const spots = spaced(xs, ys).map((at) => {
    const between =
      band === undefined
        ? ''
        : `; 95 %: ${said(band.low[at], chart.y.dimension)} to ${said(band.high[at], chart.y.dimension)}`;
    const text = `${name}: ${said(ys[at], chart.y.dimension)} at ${said(xs[at], chart.x.dimension)}${between}`;
    return element(
      'circle',
      { class: 'spot', cx: frame.x.at(xs[at] ?? 0), cy: frame.y.at(ys[at] ?? 0), r: 3 },
      element('title', {}, text),
    );
  });
  return element('g', { class: lookClass(look) }, spots);
}

/** About nine of the places that are drawn, the ends among them, evenly along x. */
function spaced(xs: readonly number[], ys: readonly number[]): readonly number[] {
  const there = [...xs.keys()].filter((index) => Number.isFinite(ys[index]));
  const first = xs[there[0] ?? 0] ?? 0;
  const last = xs[there.at(-1) ?? 0] ?? 0;
  const chosen = Array.from({ length: 9 }, (_, step) => {
    const wanted = first + ((last - first) * step) / 8;
    const off = (index: number): number => Math.abs((xs[index] ?? 0) - wanted);
    return there.reduce((best, index) => (off(index) < off(best) ? index : best), there[0] ?? 0);
  });
  return there.length === 0 ? [] : [...new Set(chosen)];
}
