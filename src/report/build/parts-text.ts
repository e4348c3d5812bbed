import type { Part } from '../../arrangement/build.js';
import type { Style } from '../style.js';
import { type AnyBuild, outcomeOf } from './any-build.js';
import { bullets, prose, section, sentence } from './prose.js';

const provisos = {
  'may-be-built': '',
  'too-little': 'for what is recommended, not for the load asked for',
  'cannot-tell': 'not to be built yet',
} as const;

/** What to get and what it must bear. Whoever must not build a thing gets no list of its parts. */
export function partsText(build: AnyBuild, style: Style): string {
  const outcome = outcomeOf(build);
  if (outcome === 'must-not-be-built') return '';
  return section('Parts', build.parts.flatMap(partLines), style, provisos[outcome]);
}

function partLines({ marks, what, ratings, why }: Part): readonly string[] {
  const bears = ratings.length === 0 ? '' : `: ${ratings.join(', ')}`;
  const first = prose(`${what}${bears}`, `${marks.join(', ')}  `);
  return why === '' ? [first] : [first, prose(sentence(why), '    ')];
}

/** But for what has been said already. */
export function cautionsText(build: AnyBuild, style: Style, said: readonly string[] = []): string {
  return section('Cautions', bullets(build.cautions.filter((caution) => !said.includes(caution))), style);
}
