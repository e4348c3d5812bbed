import type { Estimate, Recommendation } from '../../arrangement/build.js';
import type { Dimension } from '../../quantity/quantity.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { estimateCells } from '../build/estimate-text.js';
import { sentence } from '../build/prose.js';
import type { Markup } from '../page/markup.js';
import { section } from '../page/page.js';
import { table } from '../page/table.js';

/** A row of the numbers: what, value, limits, note. */
export type NumberRow = readonly [what: string, value: string, limits: string, note: string];

/** An estimate as a row. */
export function numberRow(what: string, estimate: Estimate, dimension: Dimension, note = ''): NumberRow {
  const [value, limits] = estimateCells(estimate, dimension);
  return [what, value, limits, note];
}

/**
 * The numbers of what is built, what it is recommended for first.
 * @param of the group or the string.
 * @param recommended undefined where it is refused: then nothing is recommended.
 */
export function numbersSection(
  of: string,
  recommended: Recommendation | undefined,
  rows: readonly NumberRow[],
): Markup {
  const first: readonly NumberRow[] =
    recommended === undefined
      ? []
      : [
          [
            'Recommended, continuously',
            roundedDown(recommended.current, 'current'),
            '',
            sentence(`Set by ${recommended.setBy}`),
          ],
        ];
  return section(
    'Numbers',
    table(
      `The ${of} as a whole; the limits hold the value with 95 %.`,
      [
        { heading: 'What', as: 'name' },
        { heading: 'Value', as: 'number' },
        { heading: '95 %', as: 'fixed' },
        { heading: 'Note', as: 'long' },
      ],
      [...first, ...rows],
    ),
  );
}
