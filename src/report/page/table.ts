import { type Content, element, type Markup } from './markup.js';

/** A column: its heading, and how its cells stand. `name`: each heads its row. */
export interface Column {
  readonly heading: string;
  readonly as?: 'name' | 'number' | 'fixed' | 'text' | 'long';
}

/**
 * A table with a caption and headings for both ways. Where it is wider than the screen it scrolls by itself, by
 * keys as well; one with long texts becomes a list of its rows there. Undefined without rows.
 */
export function table(
  caption: string,
  columns: readonly Column[],
  rows: readonly (readonly Content[])[],
): Markup | undefined {
  if (rows.length === 0) return undefined;
  const heads = columns.map(({ heading, as }) =>
    element('th', { scope: 'col', class: as === 'number' ? 'number' : undefined }, heading),
  );
  const hasNotes = columns.some(({ as }) => as === 'long');
  const body = rows.map((row) =>
    element(
      'tr',
      {},
      row.map((cell, index) => {
        const { as, heading } = columns[index] ?? {};
        return as === 'name'
          ? element('th', { scope: 'row' }, cell)
          : element('td', { class: as, 'data-head': hasNotes ? heading : undefined }, cell);
      }),
    ),
  );
  return wide(
    caption,
    element(
      'table',
      { class: hasNotes ? 'notes' : undefined },
      element('caption', {}, caption),
      element('thead', {}, element('tr', {}, heads)),
      element('tbody', {}, body),
    ),
  );
}

/** What may be wider than a screen: it scrolls within itself, and the page does not. */
export function wide(label: string, content: Content): Markup {
  return element('div', { class: 'wide', role: 'group', 'aria-label': label, tabindex: 0 }, content);
}
