import { valueInWords } from '../../judgement/change-in-words.js';
import type { Compared } from '../../judgement/compare.js';
import { type Movement, movementOf } from '../../judgement/movement.js';
import { listed } from '../../quantity/listed.js';
import type { ComparedRecords } from '../comparison.js';
import { type Content, element, type Markup } from '../page/markup.js';
import { bullets, section } from '../page/page.js';
import { allowanceInWords, movedInWords } from './compared-words.js';

/**
 * What moved whatever may be, what did not, and what nobody can tell. What moved too far stands in the answer with its
 * numbers; here it is named only.
 */
export function movementsSection({ comparison: { findings } }: ComparedRecords): Markup | undefined {
  if (findings.length === 0) return undefined;
  const of = (movement: Movement): readonly Compared[] =>
    findings.filter((compared) => movementOf(compared) === movement);
  const moved = of('moved');
  const [within, unasked, wrong] = [
    moved.filter(({ outcome }) => outcome === 'conforms' || outcome === 'undecided'),
    moved.filter(({ outcome }) => outcome === 'not-judged'),
    moved.filter(({ outcome }) => outcome === 'does-not-conform'),
  ];
  return section(
    'What moved and what did not',
    bullets(
      [
        moved.length === 0 && 'Nothing moved by more than its uncertainty leaves open.',
        ...inOne('Moved, and should not have', wrong),
        ...oneByOne('Moved', within),
        ...oneByOne('Moved, and nothing is asked of it', unasked),
        ...inOne('Not seen to move', of('as-it-was')),
        ...oneByOne('Without an uncertainty, as it stands', of('as-it-stands')),
        ...oneByOne('Can not be told', of('not-told').filter(isInBoth)),
        ...alone('In the earlier record only', findings, 'before', 'after'),
        ...alone('In the later record only', findings, 'after', 'before'),
      ].filter((said) => said !== false),
    ),
    element(
      'p',
      { class: 'soft' },
      'A finding moved when its two values are further apart than their uncertainties together leave open, ' +
        'and a word when it is another one; how far it may is for the tolerance to say.',
    ),
  );
}

function inOne(lead: string, findings: readonly Compared[]): readonly Content[] {
  if (findings.length === 0) return [];
  return [[element('strong', {}, `${lead}: `), `${listed(findings.map(({ finding }) => finding))}.`]];
}

function oneByOne(lead: string, findings: readonly Compared[]): readonly Content[] {
  return findings.map((compared) => {
    const { finding, note, expected } = compared;
    const asked = expected === undefined ? '' : `; ${allowanceInWords(compared)}`;
    return [
      element('strong', {}, `${lead}: `),
      `${finding} ${movedInWords(compared)}${asked}${note === '' ? '' : `; ${note}`}.`,
    ];
  });
}

function isInBoth({ before, after }: Compared): boolean {
  return before !== undefined && after !== undefined;
}

function alone(
  lead: string,
  findings: readonly Compared[],
  there: 'before' | 'after',
  missing: 'before' | 'after',
): readonly Content[] {
  const said = findings.flatMap((compared) => {
    const one = compared[there];
    return one === undefined || compared[missing] !== undefined
      ? []
      : [`${compared.finding} ${valueInWords(one)}`];
  });
  return said.length === 0 ? [] : [[element('strong', {}, `${lead}: `), `${listed(said)}.`]];
}
