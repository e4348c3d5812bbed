import { type Finding, findingNamed } from '../analysis/finding.js';
import { formatQuantity } from '../quantity/format-quantity.js';

/** A line of the way from what is usable to what is recommended: sign, number, what it is, why. */
export type DerivationRow = readonly [sign: string, value: string, name: string, why: string];

/** Empty where nothing is recommended. */
export function derivationRows(findings: readonly Finding[]): readonly DerivationRow[] {
  const recommended = findingNamed(findings, 'recommended-current');
  const usable = findingNamed(findings, 'usable-current');
  if (recommended === undefined || usable === undefined) return [];
  const amps = (value: number): string => formatQuantity(value, 'current', { significant: 4 });
  return [
    [
      '',
      amps(Number(usable.value)),
      'usable-current',
      usable.bound === 'least' ? `at least: ${usable.note}` : usable.note,
    ],
    ...recommended.factors.map(({ name, factor, reason }): DerivationRow => [
      '×',
      factor.toFixed(3),
      name,
      reason,
    ]),
    ['=', amps(Number(recommended.value)), 'recommended-current', recommended.note],
  ];
}
