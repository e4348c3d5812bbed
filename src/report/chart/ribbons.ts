import { element, type Markup } from '../page/markup.js';
import type { Frame } from './frame.js';
import { cutToWidth, lineHeight, textWidth } from './text-width.js';

/** A strip below a chart that says what holds over which stretch of x. */
export interface Ribbon {
  readonly label: string;
  readonly stretches: readonly {
    readonly from: number;
    readonly to: number;
    readonly word: string;
    /** Stands for the word where one of the strip has no room for its own; the label then says what it means. */
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
    const inWords = stretches.every(({ from, to, word }) => fits(word, frame.x.at(to) - frame.x.at(from)));
    const signs = new Map(stretches.map(({ word, sign }) => [sign, `${sign} ${word}`]));
    const head = inWords ? label : `${label}: ${[...signs.values()].join(', ')}`;
    return element(
      'g',
      {},
      element(
        'text',
        { class: 'unit', x: frame.x.start, y: top - 5 },
        cutToWidth(head, frame.width - frame.x.start),
      ),
      stretches.map(({ from, to, word, sign }) => {
        const x = frame.x.at(from);
        const width = frame.x.at(to) - x;
        const text = inWords ? word : sign;
        return element(
          'g',
          {},
          element('rect', { class: 'ribbon', x, y: top, width, height }, element('title', {}, word)),
          fits(text, width) &&
            element('text', { x: x + width / 2, y: top + 14.5, 'text-anchor': 'middle' }, text),
        );
      }),
    );
  });
}

function fits(text: string, width: number): boolean {
  return textWidth(text) + 6 <= width;
}
