import { alikeConcerns } from '../build/alike-concerns.js';
import { type AnyBuild, type BuildOutcome, outcomeOf } from '../build/any-build.js';
import { sentence } from '../build/prose.js';
import { element, type Markup } from '../page/markup.js';
import { bullets } from '../page/page.js';

/** A standing has its words, its shape and its colour; the words alone would do. */
const standings: Readonly<Record<BuildOutcome, { readonly word: string; readonly look: string }>> = {
  'may-be-built': { word: 'May be built', look: 'good' },
  'too-little': { word: 'Too little for the load asked for', look: 'unsure' },
  'must-not-be-built': { word: 'Must not be built', look: 'bad' },
  'cannot-tell': { word: 'Cannot tell whether it may be built', look: 'unsure' },
};

const shapes: Readonly<Record<BuildOutcome, { readonly outline: string; readonly sign: string }>> = {
  // A disc with a tick.
  'may-be-built': { outline: 'M4 30a26 26 0 1 0 52 0a26 26 0 1 0 -52 0z', sign: 'M18 31L27 40L43 21' },
  // A cup that is not full.
  'too-little': { outline: 'M8 8H52V52H8Z', sign: 'M8 36H52M18 44H42' },
  // An octagon with a bar.
  'must-not-be-built': { outline: 'M19 4H41L56 19V41L41 56H19L4 41V19Z', sign: 'M16 30H44' },
  // A triangle with a question mark.
  'cannot-tell': {
    outline: 'M30 5L57 54H3Z',
    sign: 'M23 29a7 7 0 1 1 9.5 6.5c-2 .8 -2.5 2 -2.5 4M30 46v1',
  },
};

/** The first thing seen: whether it may be built, in words and a shape, what it feeds or why not. */
export function banner(build: AnyBuild, said: readonly string[]): Markup {
  const outcome = outcomeOf(build);
  const { word, look } = standings[outcome];
  const { standing } = build;
  const because = standing.kind === 'may-be-built' ? [] : standing.because;
  return element(
    'div',
    { class: `standing ${look}` },
    shape(outcome),
    element(
      'div',
      {},
      element('p', { class: 'word' }, word),
      said.map((each, index) => element('p', { class: index === 0 ? 'lead' : undefined }, sentence(each))),
      because.length === 1
        ? element('p', { class: 'lead' }, because.map(sentence))
        : bullets(because.map(sentence)),
      seeConcerns(build),
    ),
  );
}

/** Where it may be built they come before that; where not they are what else there is to say. */
function seeConcerns(build: AnyBuild): Markup | undefined {
  const { length } = alikeConcerns(build.concerns);
  if (length === 0) return undefined;
  const what = length === 1 ? 'One thing is' : `${length} things are`;
  const when = build.standing.kind === 'may-be-built' ? 'before it is built' : 'besides';
  return element(
    'p',
    {},
    `${what} to be known ${when}: `,
    element('a', { href: '#about-the-records' }, 'about the records'),
    '.',
  );
}

function shape(outcome: BuildOutcome): Markup {
  const { outline, sign } = shapes[outcome];
  return element(
    'svg',
    { viewBox: '0 0 60 60', 'aria-hidden': 'true' },
    element('path', { class: 'outline', d: outline }),
    element('path', { class: 'sign', d: sign }),
  );
}
