import { line } from 'd3-shape';
import { dashes } from '../page/look.js';
import { element, type Markup } from '../page/markup.js';
import type { Frame } from './frame.js';
import { type Place, straightened } from './straightened.js';

export interface ChartLine {
  /** Stands at its right end. */
  readonly name: string;
  readonly xs: readonly number[];
  /** A line is broken where a value is not finite. */
  readonly ys: readonly number[];
  /** Between which it lies with 95 %. */
  readonly band?: { readonly low: readonly number[]; readonly high: readonly number[] };
  /** Colour and dashes; by its place among the lines where left out. */
  readonly look?: number;
}

export type LookedLine = ChartLine & Required<Pick<ChartLine, 'look'>>;

export function looked(lines: readonly ChartLine[]): readonly LookedLine[] {
  return lines.map((line, index) => ({ ...line, look: line.look ?? index }));
}

/** In units of the drawing: less than a tenth of a line's own width. */
const tolerance = 0.15;

/** What a line lies within. */
export function drawnBand({ xs, ys, band, look }: LookedLine, frame: Frame): Markup | undefined {
  if (band === undefined) return undefined;
  const edge = (values: readonly number[]): readonly Place[] =>
    straightened(placesOf(xs, values, frame).filter(isDrawn), tolerance);
  if (!ys.some(Number.isFinite)) return undefined;
  const low = edge(band.low);
  const high = edge(band.high);
  const outline = [...high, ...[...low].reverse()];
  return element(
    'g',
    { class: lookClass(look) },
    element('path', { class: 'band', d: pathOf(outline, 'closed') }),
  );
}

export function drawnLine({ name, xs, ys, look }: LookedLine, frame: Frame): Markup {
  const d = stretchesOf(placesOf(xs, ys, frame)).map((stretch) => pathOf(straightened(stretch, tolerance)));
  return element(
    'g',
    { class: lookClass(look) },
    element('path', { class: 'line', 'data-of': name, d: d.join('') }),
  );
}

/** There are so many looks; then they begin again. */
export function lookClass(look: number): string {
  return `s${look % dashes.length}`;
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
