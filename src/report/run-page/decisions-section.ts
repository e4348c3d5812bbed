import { findingNamed } from '../../analysis/finding.js';
import type { Decision, Outcome } from '../../judgement/judge.js';
import { element, type Markup } from '../page/markup.js';
import { section } from '../page/page.js';
import { table } from '../page/table.js';
import { probabilityInWords } from '../record-words.js';
import type { Result } from '../result.js';
import { foundPlusMinus } from './in-words.js';

const verdicts: Readonly<Record<Outcome, { readonly words: string; readonly look: string }>> = {
  conforms: { words: 'conforms', look: 'good' },
  'does-not-conform': { words: 'does not conform', look: 'bad' },
  undecided: { words: 'undecided', look: 'unsure' },
};

/** In a word that stands out. */
export function verdict(outcome: Outcome): Markup {
  const { words, look } = verdicts[outcome];
  return element('span', { class: `state ${look}` }, words);
}

/** What was required, what was found, and what comes of it. */
export function decisionsSection({ decisions, findings }: Result): Markup | undefined {
  if (decisions.length === 0) return undefined;
  return section(
    'Decisions',
    table(
      'Guarded by the expanded uncertainty: what lies closer to its limit than that is undecided (JCGM 106, ILAC-G8).',
      [
        { heading: 'Finding', as: 'name' },
        { heading: 'Requirement', as: 'text' },
        { heading: 'Found', as: 'fixed' },
        { heading: 'Decision', as: 'long' },
      ],
      decisions.map((decision) => {
        const found = findingNamed(findings, decision.finding);
        return [
          decision.finding,
          decision.requirement,
          found === undefined ? 'nothing' : foundPlusMinus(found),
          decided(decision),
        ];
      }),
    ),
  );
}

function decided({ outcome, probability, note }: Decision): Markup {
  const probably =
    probability === null ? [] : [`probability of conformity ${probabilityInWords(probability)}`];
  const why = [...probably, ...(note === '' ? [] : [note])];
  return element(
    'span',
    {},
    verdict(outcome),
    why.length > 0 && element('span', { class: 'why' }, why.join('; ')),
  );
}
