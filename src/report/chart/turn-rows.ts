import { element, type Markup, short } from '../page/markup.js';
import { lookClass } from './drawn-line.js';
import type { Frame } from './frame.js';
import { drawnShape, type Shape } from './shapes.js';
import { shiftArrow } from './shift-arrow.js';
import { cutToWidth, lineHeight, textWidth } from './text-width.js';

/** A row below a plot, on its axis of x: places worth knowing, and from which to which one moved. */
export interface TurnRow {
  readonly name: string;
  readonly places: readonly TurnPlace[];
  /** What is said of the arrow from the first place to the last; undefined where nothing moved. */
  readonly moved: string | undefined;
}

export interface TurnPlace {
  readonly at: number;
  readonly between?: readonly [low: number, high: number] | undefined;
  readonly shape: Shape;
  readonly look: number;
  /** When pointed at. */
  readonly says: string;
}

const rowHeight = lineHeight + 22;

export function roomForTurns(rows: readonly TurnRow[]): number {
  return rows.length === 0 ? 0 : rows.length * rowHeight + 8;
}

/** Lines in the plot at the places of the rows, so that one sees where the curves are there. */
export function turnLines(rows: readonly TurnRow[], { x, y }: Frame): readonly Markup[] {
  return rows.flatMap(({ places }) =>
    places.map(({ at, look }) =>
      element(
        'g',
        { class: lookClass(look) },
        element('line', { class: 'turn', x1: x.at(at), x2: x.at(at), y1: y.end, y2: y.start }),
      ),
    ),
  );
}

/** One below the other from `top` on, each under its name. */
export function turnRows(rows: readonly TurnRow[], top: number, frame: Frame): readonly Markup[] {
  const { x } = frame;
  return rows.map(({ name, places, moved }, index) => {
    const baseline = top + 8 + index * rowHeight + lineHeight - 4;
    const middle = baseline + 14;
    const [first, last] = [places[0], places.at(-1)];
    return element(
      'g',
      {},
      element('text', { class: 'unit', x: nameAt(name, places, frame), y: baseline }, textOf(name, frame)),
      element('path', { class: 'grid', d: `M${short(x.start)} ${short(middle)}H${short(x.end)}` }),
      places.map((place) => drawnPlace(place, middle, frame)),
      moved !== undefined &&
        first !== undefined &&
        last !== undefined &&
        shiftArrow([x.at(first.at), middle], [x.at(last.at), middle], moved),
    );
  });
}

/** Above the places where there is room, else as far right as it goes. */
function nameAt(name: string, places: readonly TurnPlace[], { x }: Frame): number {
  const leftmost = Math.min(...places.map(({ at }) => x.at(at)), x.end);
  return Math.max(x.start, Math.min(leftmost - 8, x.end - textWidth(name)));
}

function textOf(name: string, { x }: Frame): string {
  return cutToWidth(name, x.end - x.start);
}

function drawnPlace({ at, between, shape, look, says }: TurnPlace, middle: number, { x }: Frame): Markup {
  const place = x.at(at);
  const ends = between?.map((end) => Math.max(x.start, Math.min(x.end, x.at(end))));
  const [low, high] = ends ?? [place, place];
  return element(
    'g',
    { class: lookClass(look) },
    between !== undefined &&
      element('path', {
        class: 'whisker',
        d: `M${short(low ?? place)} ${short(middle - 5)}v10m0 -5H${short(high ?? place)}m0 -5v10`,
      }),
    drawnShape(shape, [place, middle], says),
  );
}
