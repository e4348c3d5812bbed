import { element, type Markup } from '../page/markup.js';
import type { Frame } from './frame.js';
import { type Place, straightened } from './straightened.js';
import { lineHeight, textWidth } from './text-width.js';

interface Grid {
  readonly xs: readonly number[];
  readonly ys: readonly number[];
  readonly cells: readonly (readonly (number | null)[])[];
}

/** The lines of one level, in units of the drawing, each a run of neighbouring places of x. */
export interface Contour {
  readonly text: string;
  readonly stretches: readonly (readonly Place[])[];
}

/** Where the level is first passed, y rising, at each x; broken where it is not, and where it jumps. */
export function contoursOf({ xs, ys, cells }: Grid, level: number, frame: Frame): Contour['stretches'] {
  const jump = (frame.y.start - frame.y.end) / 6;
  const stretches: Place[][] = [];
  let before: Place | undefined;
  for (const [index, column] of cells.entries()) {
    const y = crossing(column, ys, level);
    const place: Place | undefined =
      y === undefined ? undefined : [frame.x.at(xs[index] ?? 0), frame.y.at(y)];
    if (place !== undefined) {
      if (before === undefined || Math.abs(before[1] - place[1]) > jump) stretches.push([place]);
      else stretches.at(-1)?.push(place);
    }
    before = place;
  }
  return stretches.filter(({ length }) => length > 1).map((stretch) => straightened(stretch, 0.15));
}

function crossing(
  column: readonly (number | null)[],
  ys: readonly number[],
  level: number,
): number | undefined {
  const above = column.findIndex((value) => value !== null && value >= level);
  const value = column[above];
  const below = column[above - 1];
  if (value === undefined || value === null || below === undefined || below === null) return undefined;
  const share = (level - below) / (value - below);
  const from = ys[above - 1] ?? 0;
  return from + share * ((ys[above] ?? from) - from);
}

interface Box {
  readonly x: number;
  readonly y: number;
  readonly width: number;
}

/** The number of each contour on it, once for each run that has room; nowhere over another number. */
export function contourNumbers(contours: readonly Contour[], frame: Frame): readonly Markup[] {
  const placed: Box[] = [];
  return contours.flatMap(({ text, stretches }) =>
    stretches.flatMap((stretch) => {
      const width = textWidth(text);
      if ((stretch.at(-1)?.[0] ?? 0) - (stretch[0]?.[0] ?? 0) < width) return [];
      const box = candidates(stretch)
        .map(([x, y]): Box => ({ x: x - width / 2, y: y - lineHeight / 2, width }))
        .find((each) => isWithin(each, frame) && placed.every((other) => !meets(each, other)));
      if (box === undefined) return [];
      placed.push(box);
      return [
        element(
          'text',
          { class: 'halo', x: box.x + width / 2, y: box.y + lineHeight - 4, 'text-anchor': 'middle' },
          text,
        ),
      ];
    }),
  );
}

/** Along the run, from its middle outwards. */
function candidates(stretch: readonly Place[]): readonly Place[] {
  return [0.5, 0.4, 0.6, 0.3, 0.7, 0.2, 0.8].map((share) => {
    const from = stretch[0] ?? [0, 0];
    const to = stretch.at(-1) ?? from;
    const x = from[0] + share * (to[0] - from[0]);
    const next = Math.max(
      1,
      stretch.findIndex(([each]) => each >= x),
    );
    const [x0, y0] = stretch[next - 1] ?? from;
    const [x1, y1] = stretch[next] ?? to;
    return [x, x1 === x0 ? y0 : y0 + ((y1 - y0) * (x - x0)) / (x1 - x0)];
  });
}

function isWithin({ x, y, width }: Box, frame: Frame): boolean {
  return (
    x > frame.x.start + 3 && x + width < frame.x.end && y > frame.y.end && y + lineHeight < frame.y.start
  );
}

function meets(one: Box, other: Box): boolean {
  return (
    one.x < other.x + other.width + 4 &&
    other.x < one.x + one.width + 4 &&
    Math.abs(one.y - other.y) < lineHeight
  );
}
