/**
 * What stands on a terminal after all that was sent to it: as ECMA-48 has it, of the sequences that our program sends,
 * and as old terminals have it, how the cursor is kept and taken back to its place in the window.
 * What scrolls off the upper edge is kept, first. Another sequence is an error, so that none is sent unseen.
 */
export function onScreen(sent: string, columns: number, rows: number): readonly string[] {
  const lines: string[][] = [[]];
  let [row, column] = [0, 0];
  let kept = { below: 0, column: 0 };
  const top = (): number => Math.max(0, lines.length - rows);
  const down = (): void => {
    row += 1;
    if (row === lines.length) lines.push([]);
  };
  const put = (sign: string): void => {
    if (column === columns) {
      down();
      column = 0;
    }
    const line = lines[row] ?? [];
    while (line.length < column) line.push(' ');
    line[column] = sign;
    column += 1;
  };
  // eslint-disable-next-line no-control-regex
  for (const [token, , numbers, final] of sent.matchAll(/\u001b\[(\??)([\d;]*)([A-Za-z])|\u001b[78]|[^]/gu)) {
    const count = Number(numbers ?? '') || 1;
    if (token === '\r') column = 0;
    else if (token === '\n') down();
    else if (token === '\u001b7') kept = { below: row - top(), column };
    else if (token === '\u001b8') [row, column] = [top() + kept.below, kept.column];
    else if (final === undefined) put(token);
    else if (final === 'A') row = Math.max(top(), row - count);
    else if (final === 'B') row = Math.min(lines.length - 1, row + count);
    else if (final === 'G') column = count - 1;
    else if (final === 'K') lines[row]?.splice(numbers === '2' ? 0 : column);
    else if (final === 'J' && numbers !== '2') {
      lines[row]?.splice(column);
      lines.splice(row + 1);
    } else if (final === 'm') continue;
    else throw new Error(`nobody knows ${JSON.stringify(token)}`);
  }
  return lines.map((line) => line.join('').trimEnd());
}
