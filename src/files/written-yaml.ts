import { wordWrap } from '../quantity/word-wrap.js';

const widestComment = 100;

/** What YAML would take for something else than a text. */
const otherwise = /^(?:null|true|false|yes|no|on|off|y|n)$/i;

/**
 * A text as one value on a line, in a flow map too: plain where it can't be taken for anything else, else quoted. Reads
 * back to the same text, whatever it holds.
 */
export function written(text: string): string {
  const isPlain = /^[\p{L}](?:[\p{L}\p{N} ./_-]*[\p{L}\p{N}])?$/u.test(text) && !otherwise.test(text);
  return isPlain ? text : JSON.stringify(text).replace(/\p{C}/gu, escaped);
}

/**
 * A comment of as many lines as it takes; nothing of it can become a line of the file, or steer a terminal. `indent`
 * is that of the key it stands above.
 */
export function comment(text: string, indent = ''): string {
  const harmless = text.replace(/[\p{C}\u2028-\u202e\u2066-\u2069]/gu, ' ');
  return wordWrap(harmless, widestComment - indent.length - 2)
    .split('\n')
    .map((line) => `${indent}# ${line}\n`)
    .join('');
}

function escaped(character: string): string {
  const code = (character.codePointAt(0) ?? 0).toString(16);
  return code.length <= 4 ? `\\u${code.padStart(4, '0')}` : `\\U${code.padStart(8, '0')}`;
}
