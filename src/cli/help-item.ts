import { type Command, Help } from 'commander';
import { wordWrap } from '../quantity/word-wrap.js';

/** What a description needs beside its word, to be read with ease. */
const leastBeside = 40;
const below = '      ';

/** An option or a command with what it means: beside it where there is room, else below it, and no word is broken. */
export function helpItem(term: string, termWidth: number, description: string, helper: Help): string {
  const width = helper.helpWidth ?? 80;
  if (width - termWidth - 4 >= leastBeside || description === '')
    return Help.prototype.formatItem.call(helper, term, termWidth, description, helper);
  const lines = wordWrap(description, width - below.length).split('\n');
  return [`  ${term}`, ...lines.map((line) => `${below}${line}`)].join('\n');
}

/** How a command is called, what goes on from a line below its words. */
export function helpUsage(command: Command, columns: number): string {
  const title = 'Usage: ';
  const usage = title + new Help().commandUsage(command);
  return wordWrap(usage, columns, ' '.repeat(title.length)).slice(title.length);
}

/** An example to be pasted: on a narrow terminal in lines that a shell takes for one. */
export function helpExample(example: string, columns: number | undefined): string {
  const goesOn = ' \\';
  const isWhole = !columns || example.length + 2 <= columns;
  const lines = isWhole ? [example] : wordWrap(example, columns - 2 - goesOn.length, '  ').split('\n');
  return `\nExample:\n${lines.map((line) => `  ${line}`).join(`${goesOn}\n`)}\n`;
}
