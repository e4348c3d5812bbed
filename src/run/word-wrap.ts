/** A text in lines no longer than the width, broken between words; a longer word keeps a line of its own. */
export function wordWrap(text: string, width: number): string {
  return text
    .split('\n')
    .map((line) => wrapLine(line, width))
    .join('\n');
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
