import { element, type Markup } from '../page/markup.js';
import type { Frame } from './frame.js';
import { lineHeight, textWidth } from './text-width.js';

/** A strip below a chart that says what holds over which stretch of x. */
export interface Ribbon {
  readonly label: string;
  readonly stretches: readonly {
    readonly from: number;
    readonly to: number;
    readonly word: string;
    /** Stands where the word has no room; the words around the chart say what it means. */
    readonly sign: string;
  }[];
}

const height = 20;
const rowHeight = lineHeight + height + 8;

export function roomForRibbons(below: readonly Ribbon[]): number {
  return below.length * rowHeight;
}

/** One below the other, each under its label. */
export function ribbons(below: readonly Ribbon[], frame: Frame): readonly Markup[] {
  const first = frame.height - roomForRibbons(below);
  return below.map(({ label, stretches }, index) => {
    const top = first + index * rowHeight + lineHeight + 2;
    return element(
      'g',
      {},
      element('text', { class: 'unit', x: frame.x.start, y: top - 5 }, label),
      stretches.map(({ from, to, word, sign }) => {
        const x = frame.x.at(from);
        const width = frame.x.at(to) - x;
        const text = [word, sign].find((each) => textWidth(each) + 6 <= width);
        return element(
          'g',
          {},
          element('rect', { class: 'ribbon', x, y: top, width, height }, element('title', {}, word)),
          text !== undefined &&
            element('text', { x: x + width / 2, y: top + 14.5, 'text-anchor': 'middle' }, text),
        );
      }),
    );
  });
}
