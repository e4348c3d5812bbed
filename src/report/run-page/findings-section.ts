import { coverageOf } from '../../analysis/coverage-of.js';
import type { Finding } from '../../analysis/finding.js';
import { type Content, element, type Markup } from '../page/markup.js';
import { section } from '../page/page.js';
import { table } from '../page/table.js';
import type { Result } from '../result.js';
import { verdict } from './decisions-section.js';
import { foundPlusMinus } from './in-words.js';

/** Every finding with what it is worth, a row each. */
export function findingsSection({ findings, decisions }: Result): Markup {
  if (findings.length === 0)
    return section('Findings', element('p', {}, 'None: the record holds too little.'));
  const decided = (name: string): readonly Content[] =>
    decisions.flatMap(({ finding, outcome }) =>
      finding === name ? [verdict(outcome), element('br', {})] : [],
    );
  return section(
    'Findings',
    table(
      'Value ± expanded uncertainty, 95 %; k is the coverage factor (JCGM 100:2008).',
      [
        { heading: 'Finding', as: 'name' },
        { heading: 'Value', as: 'number' },
        { heading: 'k', as: 'number' },
        { heading: 'Step', as: 'number' },
        { heading: 'To be known', as: 'long' },
      ],
      findings.map((finding) => [
        finding.name,
        foundPlusMinus(finding),
        factorInWords(finding),
        finding.step ?? '',
        toBeKnown(decided(finding.name), finding.note),
      ]),
    ),
  );
}

function factorInWords(finding: Finding): string {
  return coverageOf(finding)?.factor.toFixed(2) ?? '';
}

/** Empty where there is nothing, so that a narrow screen leaves its line out. */
function toBeKnown(decisions: readonly Content[], note: string): Content {
  return decisions.length === 0 ? note : element('span', {}, decisions, note);
}
