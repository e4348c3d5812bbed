import { type Content, element, type Markup } from './markup.js';

/** How something stands: a shape, a colour and words; the words alone would do. */
export interface Standing {
  readonly look: 'good' | 'bad' | 'unsure' | 'plain';
  readonly shape: Shape;
  readonly word: string;
}

export type Shape = keyof typeof shapes;

const shapes = {
  // A disc with a tick.
  tick: { outline: 'M4 30a26 26 0 1 0 52 0a26 26 0 1 0 -52 0z', sign: 'M18 31L27 40L43 21' },
  // A cup that is not full.
  'too-little': { outline: 'M8 8H52V52H8Z', sign: 'M8 36H52M18 44H42' },
  // An octagon with a bar.
  bar: { outline: 'M19 4H41L56 19V41L41 56H19L4 41V19Z', sign: 'M16 30H44' },
  // A triangle with a question mark.
  question: {
    outline: 'M30 5L57 54H3Z',
    sign: 'M23 29a7 7 0 1 1 9.5 6.5c-2 .8 -2.5 2 -2.5 4M30 46v1',
  },
  // A triangle with an exclamation mark.
  warning: { outline: 'M30 5L57 54H3Z', sign: 'M30 22V38M30 45v1' },
  // A sheet with lines on it.
  sheet: { outline: 'M12 4H48V56H12Z', sign: 'M21 20H39M21 30H39M21 40H33' },
} as const;

/** The first thing seen: how it stands, in a shape and words, and what is to be said of it. */
export function standingPanel({ look, shape, word }: Standing, ...content: readonly Content[]): Markup {
  return element(
    'div',
    { class: `standing ${look}` },
    drawn(shape),
    element('div', {}, element('p', { class: 'word' }, word), content),
  );
}

function drawn(shape: Shape): Markup {
  const { outline, sign } = shapes[shape];
  return element(
    'svg',
    { viewBox: '0 0 60 60', 'aria-hidden': 'true' },
    element('path', { class: 'outline', d: outline }),
    element('path', { class: 'sign', d: sign }),
  );
}
