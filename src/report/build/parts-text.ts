import type { Part } from '../../arrangement/build.js';
import { listed } from '../../quantity/listed.js';
import type { Style } from '../style.js';
import { type AnyBuild, outcomeOf } from './any-build.js';
import { bullets, prose, section, sentence } from './prose.js';

/** What to get and what it must bear. Whoever must not build a thing gets no list of its parts. */
export function partsText(build: AnyBuild, style: Style): string {
  const outcome = outcomeOf(build);
  if (outcome === 'must-not-be-built') return '';
  const remark = outcome === 'may-be-built' ? '' : 'for the day on which it may be built';
  return section('Parts', build.parts.flatMap(partLines), style, remark);
}

function partLines({ marks, what, ratings, why }: Part): string[] {
  const bears = ratings.length === 0 ? '' : `: ${ratings.join('; ')}`;
  return [prose(`${what}${bears}`, `${marksInWords(marks)}  `), prose(sentence(why), '    ')].filter(
    (line) => line.trim() !== '.',
  );
}

function marksInWords(marks: readonly string[]): string {
  return listed(marks);
}

export function cautionsText(build: AnyBuild, style: Style): string {
  return section('Cautions', bullets(build.cautions), style);
}
