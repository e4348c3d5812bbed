import { type Content, element, type Markup } from '../page/markup.js';
import { wide } from '../page/table.js';

/** A drawing with its title above it and the words that explain it below. */
export function figure(title: string, drawing: Markup, ...explained: readonly Content[]): Markup {
  return element(
    'figure',
    {},
    element('h3', {}, title),
    wide(title, drawing),
    explained.length > 0 && element('figcaption', {}, explained),
  );
}
