import { Help } from 'commander';
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
