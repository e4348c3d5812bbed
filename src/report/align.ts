import { stripVTControlCharacters } from 'node:util';
import { wordWrap } from '../quantity/word-wrap.js';

/** Rows of cells as lines: columns two spaces apart, numbers flush right, no blanks at the end. */
export function alignTable(
  rows: readonly (readonly string[])[],
  sides: readonly ('left' | 'right')[],
): string[] {
  const widths = sides.map((_, column) =>
    rows.reduce((widest, row) => Math.max(widest, widthOf(row[column] ?? '')), 0),
  );
  const used = sides.map((_, column) => (widths[column] ?? 0) > 0);
  return rows.map((row) =>
    sides
      .map((side, column) => pad(row[column] ?? '', widths[column] ?? 0, side))
      .filter((_, column) => used[column])
      .join('  ')
      .trimEnd(),
  );
}

/** Less is too little to read the words of a last column in. */
const leastLastColumn = 24;

/**
 * The same, each line indented, within the columns of a terminal: where a row is wider its last cell goes on below
 * itself or, where that would leave too little, on lines of its own. Where even the others are wider they stand one
 * blank apart. Elsewhere, where whoever reads looks for lines,
 * a row is always one.
 */
export function fittedTable(
  rows: readonly (readonly string[])[],
  sides: readonly ('left' | 'right')[],
  columns: number | undefined,
  indent = '  ',
): string[] {
  const lines = alignTable(rows, sides).map((line) => indent + line);
  const room = columns === undefined || columns === 0 ? Infinity : columns;
  if (lines.every((line) => widthOf(line) <= room)) return lines;
  const last = sides.length - 1;
  const heads = alignTable(
    rows.map((row) => row.slice(0, last)),
    sides.slice(0, last),
  ).map((head) => indent + head);
  const squeezed = (head: string): string =>
    widthOf(head) <= room ? head : indent + head.trim().replace(/ +/g, ' ');
  const hang = Math.max(...heads.map(widthOf)) + 2;
  return rows.flatMap((row, at) => {
    const [head, words] = [heads[at] ?? '', row[last] ?? ''];
    if (room - hang < leastLastColumn) {
      const below = words === '' ? [] : [wordWrap(`${indent}  ${words}`, room)];
      return [wordWrap(squeezed(head), room, '  '), ...below].flatMap((text) => text.split('\n'));
    }
    return wordWrap(words, room - hang)
      .split('\n')
      .map((line, index) => (index === 0 ? head.padEnd(hang) : ' '.repeat(hang)) + line)
      .map((line) => line.trimEnd());
  });
}

function pad(text: string, width: number, side: 'left' | 'right'): string {
  const blanks = ' '.repeat(Math.max(0, width - widthOf(text)));
  return side === 'left' ? text + blanks : blanks + text;
}

function widthOf(text: string): number {
  // Code points, as no table of ours holds anything wider: µ, Ω and ± are one column each.
  return Array.from(stripVTControlCharacters(text)).length;
}
