import type { Standing } from '../../arrangement/build.js';
import type { Style } from '../style.js';
import { type AnyBuild, outcomeOf } from './any-build.js';
import { bullets, prose, sentence, stopped } from './prose.js';

const refusals = {
  'must-not-be-built': 'MUST NOT BE BUILT',
  'cannot-tell': 'CANNOT TELL',
} as const;

/**
 * The first words of every text: what may be built and for how much, in the builder's own words, or that it
 * must not be, or that it can't be told, and why.
 */
export function standingText(
  build: AnyBuild,
  said: { readonly what: string; readonly tooLittle: string },
  style: Style,
): string {
  const outcome = outcomeOf(build);
  switch (outcome) {
    case 'may-be-built':
      return style.strong(prose(`May be built: ${stopped(said.what)}`));
    case 'too-little':
      return style.warn(prose(`TOO LITTLE: ${stopped(said.tooLittle)}`));
    case 'must-not-be-built':
    case 'cannot-tell':
      return refusal(refusals[outcome], build.standing, style);
  }
}

function refusal(words: string, standing: Standing, style: Style): string {
  const because = standing.kind === 'may-be-built' ? [] : standing.because;
  const [only = ''] = because;
  if (because.length < 2) return style.warn(prose(`${words}: ${sentence(only)}`));
  return [style.warn(`${words}:`), ...bullets(because)].join('\n');
}
