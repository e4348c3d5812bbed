import { line } from 'd3-shape';
import type { Dimension } from '../../quantity/quantity.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import { dashes } from '../page/look.js';
import { element, type Markup, short } from '../page/markup.js';
import { type AxisWish, domainOf } from './axis.js';
import { type ChartWords, clipped, type Frame, framed, frameOf } from './frame.js';
import { roomForMarks, type VerticalMark, verticalMarks } from './marks.js';
import { type Ribbon, ribbons, roomForRibbons } from './ribbons.js';
import { spread } from './spread.js';
import { type Place, straightened } from './straightened.js';
import { cutToWidth, lineHeight, textWidth } from './text-width.js';

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

export interface ChartLine {
  /** Stands at its right end. */
  readonly name: string;
  readonly xs: readonly number[];
  /** A line is broken where a value is not finite. */
  readonly ys: readonly number[];
  /** Between which it lies with 95 %. */
  readonly band?: { readonly low: readonly number[]; readonly high: readonly number[] };
}

const longestName = 150;
/** In units of the drawing: less than a tenth of a line's own width. */
const tolerance = 0.15;

export function lineChart(chart: LineChart): Markup {
  const { lines, marks = [], ribbons: below = [] } = chart;
  const names = lines.map(({ name }) => cutToWidth(name, longestName));
  const frame = frameOf(axesOf(chart), {
    above: (x, width) => roomForMarks(marks, x, width),
    right: Math.max(...names.map(textWidth), 0) + 26,
    below: roomForRibbons(below),
  });
  return framed(
    chart,
    frame,
    clipped(
      chart,
      lines.map((each, index) => bandOf(each, index, frame)),
    ),
    clipped(
      chart,
      lines.map((each, index) => lineOf(each, index, frame)),
    ),
    verticalMarks(marks, frame),
    lines.map((each, index) => spotsOf(each, index, chart, frame)),
    namesAtEnds(lines, names, frame),
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

function bandOf({ xs, ys, band }: ChartLine, index: number, frame: Frame): Markup | undefined {
  if (band === undefined) return undefined;
  const edge = (values: readonly number[]): readonly Place[] =>
    straightened(placesOf(xs, values, frame).filter(isDrawn), tolerance);
  if (!ys.some(Number.isFinite)) return undefined;
  const low = edge(band.low);
  const high = edge(band.high);
  const outline = [...high, ...[...low].reverse()];
  return element(
    'g',
    { class: look(index) },
    element('path', { class: 'band', d: pathOf(outline, 'closed') }),
  );
}

function lineOf({ name, xs, ys }: ChartLine, index: number, frame: Frame): Markup {
  const d = stretchesOf(placesOf(xs, ys, frame)).map((stretch) => pathOf(straightened(stretch, tolerance)));
  return element(
    'g',
    { class: look(index) },
    element('path', { class: 'line', 'data-of': name, d: d.join('') }),
  );
}

/** Round spots along a line that say what it is there, when pointed at. */
function spotsOf(each: ChartLine, index: number, chart: LineChart, frame: Frame): Markup {
  const { name, xs, ys, band } = each;
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
  return element('g', { class: look(index) }, spots);
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

/** At the right of the plot, each as near to its line's end as the others allow, and joined to it. */
function namesAtEnds(lines: readonly ChartLine[], names: readonly string[], frame: Frame): readonly Markup[] {
  const ends = lines.map(({ xs, ys }) => {
    const last = ys.findLastIndex(Number.isFinite);
    return { x: frame.x.at(xs[last] ?? 0), y: clampedY(frame.y.at(ys[last] ?? 0), frame) };
  });
  const places = spread(
    ends.map(({ y }) => y),
    lineHeight,
    [frame.y.end, frame.y.start],
  );
  return names.map((name, index) => {
    const end = ends[index] ?? { x: 0, y: 0 };
    const place = places[index] ?? end.y;
    const { end: edge } = frame.x;
    return element(
      'g',
      { class: look(index) },
      element('path', {
        class: 'lead-line',
        d: `M${short(end.x + 3)} ${short(end.y)}H${short(edge + 5)}L${short(edge + 14)} ${short(place)}`,
      }),
      element('text', { class: 'name', x: edge + 18, y: place + 4 }, name),
    );
  });
}

function clampedY(y: number, frame: Frame): number {
  return Math.max(frame.y.end, Math.min(frame.y.start, y));
}

function placesOf(xs: readonly number[], ys: readonly number[], frame: Frame): readonly Place[] {
  return xs.map((x, index) => [frame.x.at(x), frame.y.at(ys[index] ?? NaN)]);
}

function isDrawn([, y]: Place): boolean {
  return Number.isFinite(y);
}

/** The runs of places between those that are not drawn. */
function stretchesOf(places: readonly Place[]): readonly (readonly Place[])[] {
  return places.reduce<Place[][]>(
    (stretches, place) => {
      if (isDrawn(place)) stretches.at(-1)?.push(place);
      else if (stretches.at(-1)?.length !== 0) stretches.push([]);
      return stretches;
    },
    [[]],
  );
}

const drawn = line<Place>().digits(1);

function pathOf(places: readonly Place[], how: 'open' | 'closed' = 'open'): string {
  const d = drawn([...places]) ?? '';
  return how === 'closed' && d !== '' ? `${d}Z` : d;
}

function look(index: number): string {
  return `s${index % dashes.length}`;
}
