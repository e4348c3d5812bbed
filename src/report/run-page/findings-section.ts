import { coverageOf } from '../../analysis/coverage-of.js';
import type { Finding } from '../../analysis/finding.js';
import { columnsOf } from '../finding-text.js';
import { element, type Markup } from '../page/markup.js';
import { section } from '../page/page.js';
import { table } from '../page/table.js';
import type { Result } from '../result.js';
import { verdict } from './decisions-section.js';

/** Every finding with what it is worth, a row each. */
export function findingsSection({ findings, decisions }: Result): Markup {
  if (findings.length === 0)
    return section('Findings', element('p', {}, 'None: the record holds too little.'));
  const decided = (name: string): Markup[] =>
    decisions.flatMap(({ finding, outcome }) => (finding === name ? [verdict(outcome)] : []));
  return section(
    'Findings',
    table(
      'Value ± expanded uncertainty, 95 %; k is the coverage factor (JCGM 100:2008).',
      [
        { heading: 'Finding', as: 'name' },
        { heading: 'Value', as: 'number' },
        { heading: '±', as: 'number' },
        { heading: 'k', as: 'number' },
        { heading: 'Step', as: 'number' },
        { heading: 'Decision', as: 'fixed' },
        { heading: 'To be known', as: 'long' },
      ],
      findings.map((finding) => [
        finding.name,
        ...valueCells(finding),
        finding.step ?? '',
        decided(finding.name).map((each, index) => [index > 0 && element('br', {}), each]),
        finding.note,
      ]),
    ),
  );
}

function valueCells(finding: Finding): readonly string[] {
  const { value, uncertainty, unit } = columnsOf(finding);
  const least = finding.bound === 'least' ? '≥ ' : '';
  const coverage = coverageOf(finding);
  return [
    `${least}${value} ${unit}`.trim(),
    uncertainty === '' ? '' : `${uncertainty} ${unit}`,
    coverage === undefined ? '' : coverage.factor.toFixed(2),
  ];
}
