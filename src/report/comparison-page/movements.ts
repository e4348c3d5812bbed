import { valueInWords } from '../../judgement/change-in-words.js';
import type { Compared } from '../../judgement/compare.js';
import { type Movement, movementOf } from '../../judgement/movement.js';
import { capitalised } from '../../quantity/capitalised.js';
import { listed } from '../../quantity/listed.js';
import type { ComparedRecords } from '../comparison.js';
import { type Content, element, type Markup } from '../page/markup.js';
import { bullets, section } from '../page/page.js';
import { allowanceInWords } from './compared-words.js';
import { bothInWords, oneInTwenty, verbsOf } from './movement-words.js';

/**
 * What moved whatever may be, what did not, and what nobody can tell. What moved too far stands in the answer with its
 * numbers; here it is named only.
 */
export function movementsSection({
  comparison: { findings, sameModules },
}: ComparedRecords): Markup | undefined {
  if (findings.length === 0) return undefined;
  const of = (movement: Movement): readonly Compared[] =>
    findings.filter((compared) => movementOf(compared) === movement);
  const moved = of('moved');
  const verbs = verbsOf(sameModules);
  const lead = capitalised(verbs.moved);
  const oneByOne = (as: string, some: readonly Compared[]): readonly Content[] =>
    some.map((compared) => sentenceOf(as, compared, sameModules));
  const [within, unasked, wrong] = [
    moved.filter(({ outcome }) => outcome === 'conforms' || outcome === 'undecided'),
    moved.filter(({ outcome }) => outcome === 'not-judged'),
    moved.filter(({ outcome }) => outcome === 'does-not-conform'),
  ];
  return section(
    sameModules ? 'What moved and what did not' : 'What differs and what does not',
    bullets(
      [
        moved.length === 0 && `Nothing was seen to ${verbs.move} by more than its uncertainty leaves open.`,
        ...inOne(`${lead}, and should not${sameModules ? ' have' : ''}`, wrong),
        ...oneByOne(lead, within),
        ...oneByOne(`${lead}, and nothing is asked of it`, unasked),
        ...inOne(`Not seen to ${verbs.move}`, of('as-it-was')),
        ...oneByOne('Without an uncertainty, as it stands', of('as-it-stands')),
        ...oneByOne(`Whether it ${verbs.moved} can not be told`, of('not-told').filter(isInBoth)),
        ...alone('In the earlier record only', findings, 'before', 'after'),
        ...alone('In the later record only', findings, 'after', 'before'),
      ].filter((said) => said !== false),
    ),
    element(
      'p',
      { class: 'soft' },
      `A finding ${verbs.moved} when its two values are further apart than their uncertainties together leave open, ` +
        `and a word when it is another one; how far it may is for the tolerance to say. ${oneInTwenty(sameModules)}`,
    ),
  );
}

function inOne(lead: string, findings: readonly Compared[]): readonly Content[] {
  if (findings.length === 0) return [];
  return [[element('strong', {}, `${lead}: `), `${listed(findings.map(({ finding }) => finding))}.`]];
}

function sentenceOf(lead: string, compared: Compared, sameModules: boolean): Content {
  const { finding, note, expected } = compared;
  const asked = expected === undefined ? '' : `; ${allowanceInWords(compared)}`;
  return [
    element('strong', {}, `${lead}: `),
    `${finding} ${bothInWords(compared, sameModules)}${asked}${note === '' ? '' : `; ${note}`}.`,
  ];
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
