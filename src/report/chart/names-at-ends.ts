import { element, type Markup } from '../page/markup.js';
import { extremesOf } from './axis.js';
import { lookClass, type LookedLine } from './drawn-line.js';
import type { Frame } from './frame.js';
import { cutToWidth, lineHeight, textWidth } from './text-width.js';

const longest = 200;
/** From where a line ends to its name. */
const above = 9;
const below = 18;

interface Named {
  readonly text: string;
  readonly look: number;
  readonly x: number;
  /** Of the line where it ends, and the highest and lowest of it below the name. */
  readonly y: number;
  readonly highest: number;
  readonly lowest: number;
}

/**
 * The names of lines within the plot, each at the last place of its own: of those that end near each other the upper
 * line's stands above and the lower one's below. So none seems to go on where nothing was measured.
 */
export function namesAtEnds(lines: readonly LookedLine[], frame: Frame): readonly Markup[] {
  const ends = lines.flatMap((line) => endOf(line, frame)).sort((one, other) => one.y - other.y);
  const placed = ends.reduce<readonly (Named & { readonly baseline: number })[]>((done, end) => {
    const near = done.filter(({ x }) => Math.abs(x - end.x) < longest);
    const least = Math.max(...near.map(({ baseline }) => baseline)) + lineHeight;
    const wanted = near.length > 0 ? Math.max(end.lowest + below, least) : end.highest - above;
    return [...done, { ...end, baseline: clampedTo(wanted, frame) }];
  }, []);
  return placed.map(({ text, look, x, baseline }) =>
    element(
      'g',
      { class: lookClass(look) },
      element('text', { class: 'name halo', x, y: baseline, 'text-anchor': 'end' }, text),
    ),
  );
}

function endOf({ name, xs, ys, look }: LookedLine, { x, y }: Frame): readonly Named[] {
  const last = ys.findLastIndex(Number.isFinite);
  if (last < 0) return [];
  const text = cutToWidth(name, longest);
  const end = Math.max(x.at(xs[last] ?? 0), x.start + textWidth(text));
  const under = ys
    .filter((_, index) => x.at(xs[index] ?? 0) >= end - textWidth(text))
    .map((value) => y.at(value));
  const [highest, lowest] = extremesOf(under);
  return [{ text, look, x: end, y: y.at(ys[last] ?? 0), highest, lowest }];
}

function clampedTo(baseline: number, { y }: Frame): number {
  return Math.max(y.end + lineHeight, Math.min(y.start - 6, baseline));
}
