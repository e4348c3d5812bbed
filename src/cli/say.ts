import { fitted } from '../quantity/word-wrap.js';

/** Longer lines are hard to read, however wide the window. */
const widest = 100;

/**
 * A result, whose lines are its own: as they are in a pipe, where whoever reads looks for lines; on a terminal that is
 * narrower none of them is broken in a word, and what goes on from a row or a point hangs below it.
 */
export function show(
  stream: { write(text: string): unknown; readonly columns?: number },
  text: string,
): void {
  stream.write(hanging(text, stream.columns));
}

export function hanging(text: string, columns: number | undefined): string {
  return text
    .split('\n')
    .map((line) => fitted(line, columns, { hang: /^[ -]| {2}/.test(line) ? '    ' : '' }))
    .join('\n');
}

/** Words for a person, ended by a line: within the width of a terminal, and a line each in a pipe. */
export function say(
  stream: { write(text: string): unknown; readonly columns?: number },
  text: string,
  { hang = '' } = {},
): void {
  stream.write(`${fitted(text, stream.columns, { widest, hang })}\n`);
}
