import { derivationRows } from '../derivation-rows.js';
import { element, type Markup } from '../page/markup.js';
import { section } from '../page/page.js';
import { table } from '../page/table.js';
import { isWhole, type Result } from '../result.js';
import { deratingFigure } from '../run-charts/derating-chart.js';

/** How hard it may be worked, step by step. Of a test that was not finished nothing that looks like one is shown. */
export function recommendationSection(result: Result): Markup | undefined {
  const rows = derivationRows(result.findings);
  if (rows.length === 0) return undefined;
  if (!isWhole(result))
    return section(
      'How the recommendation comes about',
      element(
        'p',
        {},
        'Nothing is recommended on a test that was not finished, or on a record that is not whole.',
      ),
    );
  return section(
    'How the recommendation comes about',
    result.outcome === 'does-not-conform' &&
      element(
        'p',
        {},
        'It does not conform, so this is no release: it is what its limits alone would allow.',
      ),
    deratingFigure(result),
    table(
      'Factor by factor.',
      [
        { heading: 'Step', as: 'name' },
        { heading: 'Value', as: 'number' },
        { heading: 'Why', as: 'long' },
      ],
      rows.map(([sign, value, name, why]) => [name, `${sign} ${value}`.trimStart(), why]),
    ),
  );
}
