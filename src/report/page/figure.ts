import { type Content, element, type Markup } from './markup.js';
import { wide } from './table.js';

/** A drawing and the words that explain it below. Its title is for those who can't see it: a heading stands above. */
export function figure(title: string, drawing: Markup, ...explained: readonly Content[]): Markup {
  return element(
    'figure',
    {},
    wide(title, drawing),
    explained.length > 0 && element('figcaption', {}, explained),
  );
}
