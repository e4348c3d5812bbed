import type { ResistorChosen } from '../../arrangement/build.js';
import type { ParallelBuild } from '../../arrangement/parallel-build.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import { alignTable } from '../align.js';
import type { Style } from '../style.js';
import { brief, loadInWords } from './brief.js';
import { estimateInWords } from './estimate-text.js';
import { prose, section, sentence } from './prose.js';

/** The resistor in series with each module: what it is, what it bears, what to buy and what it costs. */
export function ballastText({ ballast, wish, standing }: ParallelBuild, style: Style): string {
  switch (ballast.kind) {
    case 'none':
      return section('Ballast', [prose('None is needed: joined directly they share as wished.')], style);
    case 'impossible':
      // A refusal has said so first.
      if (standing.kind === 'must-not-be-built') return '';
      return section('Ballast', [prose(sentence(`None does what is wished: ${ballast.why}`))], style);
    case 'resistor': {
      const origin = ballastOrigin(wish);
      return section('Ballast', alignTable(rowsOf(ballast), ['left', 'left', 'left']), style, origin);
    }
  }
}

/** Why it is that value. */
export function ballastOrigin({ ballast, load }: ParallelBuild['wish']): string {
  if (ballast.kind === 'given') return 'as it was given';
  const asked = load === undefined ? '' : ' and the load asked for';
  return `the least of E12 (IEC 60063) for ${formatQuantity(ballast.most, 'ratio')} imbalance${asked}`;
}

function rowsOf(ballast: ResistorChosen): string[][] {
  const { resistance, tolerance, dissipation, dissipationAtLimit, rating, voltageCost } = ballast;
  const shares = `± ${brief(tolerance, 'ratio')}`;
  return [
    ['resistance', `${brief(resistance, 'resistance')} ${shares}`, 'in series with each module'],
    ['buy', rating === undefined ? 'NONE WILL DO' : `${brief(rating, 'power')} or more`, 'each'],
    ['heat', brief(dissipation, 'power'), 'the most in use'],
    ['', brief(dissipationAtLimit, 'power'), 'with its module at its limit'],
    ['cost', brief(voltageCost, 'voltage'), 'across it at full load'],
  ];
}

/** How unevenly they would share without ballast: at the load, or where they fail before it. */
export function imbalanceWithout({
  withoutBallast: without,
  load,
}: Pick<ParallelBuild, 'withoutBallast' | 'load'>): string {
  const at =
    without.load < load.current
      ? `Just before they fail, at ${brief(without.load, 'current')},`
      : `At ${loadInWords(load)}`;
  return `${at} the imbalance would be ${estimateInWords(without.imbalance, 'ratio')}`;
}
