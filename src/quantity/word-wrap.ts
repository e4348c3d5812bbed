/**
 * A text in lines no longer than the width, broken between words; a longer word keeps a line of its own. What goes on
 * from a line begins with `hang`. A number and its unit are one word.
 */
export function wordWrap(text: string, width: number, hang = ''): string {
  return unbroken(text)
    .split('\n')
    .map((line) => wrapLine(line, width, hang))
    .join('\n')
    .replaceAll('\u00a0', ' ');
}

/** A number and its unit stay on one line. */
function unbroken(text: string): string {
  return text.replace(/(?<=\d) (?=(?:[µmkM]?[VAΩWKs]|min|h|%|°C)(?![\p{L}\d]))/gu, '\u00a0');
}

/**
 * A text as a terminal of so many columns shows it without breaking a word, each line indented. Whoever reads a
 * pipe has lines of their own, and a terminal that nobody told its size has no columns at all.
 */
export function fitted(
  text: string,
  columns: number | undefined,
  { widest = Infinity, indent = '', hang = '' } = {},
): string {
  const width = columns === undefined || columns === 0 ? Infinity : Math.min(columns, widest);
  return wordWrap(text, width - indent.length, hang).replace(/^/gm, indent);
}

/** How wide a text stands on a terminal: its colours take no room. */
function seen(text: string): number {
  // eslint-disable-next-line no-control-regex
  return Array.from(text.replace(/\u001b\[[\d;]*m/g, '')).length;
}

/** An indented line goes on as far in as it began. */
function wrapLine(line: string, width: number, hang: string): string {
  const lead = /^ */.exec(line)?.[0] ?? '';
  const lines: string[] = [];
  let current = lead;
  let isEmpty = true;
  for (const word of line.slice(lead.length).split(' ')) {
    const longer = isEmpty ? current + word : `${current} ${word}`;
    if (seen(longer) > width && !isEmpty) {
      lines.push(current.trimEnd());
      current = lead + hang + word;
    } else {
      current = longer;
    }
    isEmpty = false;
  }
  return [...lines, current].join('\n');
}
