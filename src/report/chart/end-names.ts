import { element, type Markup, short } from '../page/markup.js';
import { lookClass, type LookedLine } from './drawn-line.js';
import type { Frame } from './frame.js';
import { spread } from './spread.js';
import { cutToWidth, lineHeight, textWidth } from './text-width.js';

/** A name at the right of the plot, and where what it names ends. */
export interface EndName {
  readonly name: string;
  /** In units of the drawing; `x` where the name is joined to. */
  readonly x: number;
  readonly y: number;
  /** Of the group round name and lead. */
  readonly class: string | undefined;
}

const longestName = 150;

/** How much room the names take at the right of the plot. */
export function roomForNames(names: readonly string[]): number {
  return Math.max(...names.map((name) => textWidth(cutToWidth(name, longestName))), 0) + 26;
}

/** Below the edge of the plot, so that a name there does not meet the words of a mark above it. */
const clear = 10;

/**
 * Each as near to its own end as the others allow, and joined to it.
 * @param marked whether words of marks stand above the plot.
 */
export function endNames(ends: readonly EndName[], frame: Frame, marked = false): readonly Markup[] {
  const clamped = ends.map(({ y }) => Math.max(frame.y.end, Math.min(frame.y.start, y)));
  const places = spread(clamped, lineHeight, [frame.y.end + (marked ? clear : 0), frame.y.start]);
  return ends.map(({ name, x, class: own }, index) => {
    const y = clamped[index] ?? 0;
    const place = places[index] ?? y;
    const { end: edge } = frame.x;
    return element(
      'g',
      { class: own },
      element('path', {
        class: 'lead-line',
        d: `M${short(x)} ${short(y)}H${short(edge + 5)}L${short(edge + 14)} ${short(place)}`,
      }),
      element('text', { class: 'name', x: edge + 18, y: place + 4 }, cutToWidth(name, longestName)),
    );
  });
}

/** Where a line ends, for its name. */
export function endOf({ name, xs, ys, look }: LookedLine, frame: Frame): EndName {
  const last = ys.findLastIndex(Number.isFinite);
  return { name, x: frame.x.at(xs[last] ?? 0) + 3, y: frame.y.at(ys[last] ?? 0), class: lookClass(look) };
}
