import { stripVTControlCharacters } from 'node:util';

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

function pad(text: string, width: number, side: 'left' | 'right'): string {
  const blanks = ' '.repeat(Math.max(0, width - widthOf(text)));
  return side === 'left' ? text + blanks : blanks + text;
}

function widthOf(text: string): number {
  // Code points, as no table of ours holds anything wider: µ, Ω and ± are one column each.
  return Array.from(stripVTControlCharacters(text)).length;
}
