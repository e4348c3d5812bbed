import { alikeConcerns } from '../build/alike-concerns.js';
import { type AnyBuild, type BuildOutcome, outcomeOf } from '../build/any-build.js';
import { sentence } from '../build/prose.js';
import { element, type Markup } from '../page/markup.js';
import { bullets } from '../page/page.js';
import { type Standing, standingPanel } from '../page/standing.js';

const standings: Readonly<Record<BuildOutcome, Standing>> = {
  'may-be-built': { word: 'May be built', look: 'good', shape: 'tick' },
  'too-little': { word: 'Too little for the load asked for', look: 'unsure', shape: 'too-little' },
  'must-not-be-built': { word: 'Must not be built', look: 'bad', shape: 'bar' },
  'cannot-tell': { word: 'Cannot tell whether it may be built', look: 'unsure', shape: 'question' },
};

/** The first thing seen: whether it may be built, in words and a shape, what it feeds or why not. */
export function banner(build: AnyBuild, said: readonly string[]): Markup {
  const { standing } = build;
  const because = standing.kind === 'may-be-built' ? [] : standing.because;
  return standingPanel(
    standings[outcomeOf(build)],
    said.map((each, index) => element('p', { class: index === 0 ? 'lead' : undefined }, sentence(each))),
    because.length === 1
      ? element('p', { class: 'lead' }, because.map(sentence))
      : bullets(because.map(sentence)),
    seeConcerns(build),
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
