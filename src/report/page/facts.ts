import { type Content, element, type Markup } from './markup.js';

/** What is known of something: a word, and what it is; a line each. What is undefined is left out. */
export type Fact = readonly [word: string, what: Content];

export function facts(each: readonly (Fact | undefined)[]): Markup {
  return element(
    'dl',
    { class: 'facts' },
    each.map((fact) => fact !== undefined && [element('dt', {}, fact[0]), element('dd', {}, fact[1])]),
  );
}

/** A checksum, an address, a path: to be compared sign by sign. */
export function code(text: string): Markup {
  return element('span', { class: 'code' }, text);
}

/** A checksum as a whole: on a narrow screen two lines of the same length, and in one piece when it is copied. */
export function hash(text: string): Markup {
  return element('span', { class: 'code hash' }, text);
}
