/** A text in lines no longer than the width, broken between words; a longer word keeps a line of its own. */
export function wordWrap(text: string, width: number): string {
  return text
    .split('\n')
    .map((line) => wrapLine(line, width))
    .join('\n');
}

/**
 * A text as a terminal of so many columns shows it without breaking a word, each line indented. Whoever reads a
 * pipe has lines of their own, and a terminal that nobody told its size has no columns at all.
 */
export function fitted(
  text: string,
  columns: number | undefined,
  { widest = Infinity, indent = '' } = {},
): string {
  const width = columns === undefined || columns === 0 ? Infinity : Math.min(columns, widest);
  return wordWrap(text, width - indent.length).replace(/^/gm, indent);
}

function wrapLine(line: string, width: number): string {
  const lines: string[] = [];
  let current = '';
  for (const word of line.split(' ')) {
    const longer = current === '' ? word : `${current} ${word}`;
    if (longer.length > width && current !== '') {
      lines.push(current);
      current = word;
    } else {
      current = longer;
    }
  }
  return [...lines, current].join('\n');
}
