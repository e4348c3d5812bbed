import { element, type Markup } from '../page/markup.js';
import type { Axis } from './axis.js';
import type { Frame } from './frame.js';
import { cutToWidth, lineHeight, textWidth } from './text-width.js';

/** A vertical line at a place worth knowing: what is recommended, where it is switched over. */
export interface VerticalMark {
  readonly at: number;
  /** A few words. */
  readonly label: string;
  /** What it lies between; `only`: it is a stretch, and no place within it counts for more than another. */
  readonly between?: { readonly from: number; readonly to: number; readonly only: boolean };
}

interface Flag {
  readonly place: number;
  readonly between: VerticalMark['between'];
  readonly text: string;
  /** Of the label, from left to right. */
  readonly from: number;
  readonly to: number;
  /** Counted from the plot upwards. */
  readonly row: number;
}

/** How high the labels of the marks stand above the plot. */
export function roomForMarks(marks: readonly VerticalMark[], x: Axis, width: number): number {
  return Math.max(0, ...flags(marks, x, width).map(({ row }) => row + 1)) * lineHeight;
}

/** The lines, each with its label above and beside it. */
export function verticalMarks(marks: readonly VerticalMark[], { width, x, y }: Frame): readonly Markup[] {
  const placed = flags(marks, x, width).map((flag) => ({
    ...flag,
    baseline: y.end - 6 - flag.row * lineHeight,
  }));
  return [
    ...placed.map(({ place, between, baseline }) => {
      const foot = between?.only === true ? y.end : y.start;
      return element('line', { class: 'mark', x1: place, x2: place, y1: baseline + 3, y2: foot });
    }),
    // After the lines: of marks at one place the upper one's line may meet the lower one's label.
    ...placed.map(({ text, from, baseline }) =>
      element('text', { class: 'halo', x: from, y: baseline }, text),
    ),
  ];
}

/** What the marks lie between, to be drawn behind all else. Never so narrow that it can't be seen. */
export function markBands(marks: readonly VerticalMark[], { x, y }: Frame): readonly Markup[] {
  return marks.flatMap(({ label, between }) => {
    if (between === undefined) return [];
    const [from, to] = [x.at(between.from), x.at(between.to)].sort((one, other) => one - other) as [
      number,
      number,
    ];
    const start = Math.max(x.start, from);
    const width = Math.max(narrowest, Math.min(x.end, to) - start);
    return [
      element(
        'rect',
        { class: 'between', x: start, y: y.end, width, height: y.start - y.end },
        element('title', {}, label),
      ),
    ];
  });
}

const narrowest = 1.5;

/** From right to left, each in the lowest row in which it neither meets another label nor is crossed by a line. */
function flags(marks: readonly VerticalMark[], x: Axis, width: number): readonly Flag[] {
  const placed: Flag[] = [];
  const sorted = [...marks].sort(
    (one, other) => other.at - one.at || textWidth(one.label) - textWidth(other.label),
  );
  for (const { at, label, between } of sorted) {
    const place = x.at(at);
    const text = cutToWidth(label, width - x.start);
    const from = Math.min(place + beside, width - textWidth(text));
    const flag = { place, between, text, from, to: from + textWidth(text) };
    const rows = [...placed.keys(), placed.length];
    const row = rows.find((each) => placed.every((other) => !disturbs({ ...flag, row: each }, other)));
    placed.push({ ...flag, row: row ?? placed.length });
  }
  return placed;
}

/** From a line to its label. */
const beside = 5;

function disturbs(one: Flag, other: Flag): boolean {
  const holds = (flag: Flag, place: number): boolean => flag.from - 3 < place && place < flag.to + 3;
  if (one.row === other.row) return one.from < other.to + 10 && other.from < one.to + 10;
  const [lower, higher] = one.row < other.row ? [one, other] : [other, one];
  return holds(lower, higher.place);
}
