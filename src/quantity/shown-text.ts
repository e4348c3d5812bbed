import { printable } from './printable.js';

/**
 * A text as messages quote it: in single quotes, cut when long, and with whatever would break a line,
 * steer a terminal or hide itself (controls, formats, lone surrogates) written as an escape.
 */
export function shown(text: string): string {
  const cut = text.length > longest ? `${text.slice(0, longest)}…` : text;
  return `'${printable(cut)}'`;
}

const longest = 60;
