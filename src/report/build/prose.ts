import { wordWrap } from '../../quantity/word-wrap.js';
import type { Style } from '../style.js';

/** With the two columns that a section sets its lines in, 80. */
const width = 78;

/** Prose in lines that fit 80 columns; the first line begins as told, the others are set in as far. */
export function prose(text: string, before = ''): string {
  const [first = '', ...others] = wordWrap(text, width - before.length).split('\n');
  const indent = ' '.repeat(before.length);
  return [before + first, ...others.map((line) => indent + line)].join('\n');
}

/** Each a dash and its text. */
export function bullets(texts: readonly string[]): string[] {
  return texts.map((text) => prose(sentence(text), '- '));
}

/** With its capital and its full stop, wherever it came from. */
export function sentence(text: string): string {
  return stopped(text.replace(/^[a-z](?=[a-z' ])/, (first) => first.toUpperCase()));
}

/** With its full stop; it may begin with a name, which keeps its letters. */
export function stopped(text: string): string {
  return /[.!?:]$/.test(text) ? text : `${text}.`;
}

/** A heading, a faint remark beside it, and its lines set in; nothing where there are no lines. */
export function section(title: string, lines: readonly string[], style: Style, remark = ''): string {
  if (lines.length === 0) return '';
  const beside = remark === '' ? '' : `   ${remark}`;
  return [
    style.strong(title) + style.faint(beside),
    ...lines.map((line) => line.replace(/^(?=.)/gm, '  ')),
  ].join('\n');
}

/** Parts of a text, an empty line between them; what is empty is left out. */
export function text(parts: readonly string[]): string {
  return `${parts.filter((part) => part !== '').join('\n\n')}\n`;
}
