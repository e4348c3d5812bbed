import { inWords, measured } from '../../src/analysis/finding.js';
import type { Baseline, ToleranceEntry } from '../../src/record/baseline.js';

/** The droop of a module, with the standard uncertainty that the nursery's instruments give. */
export function droopOf(value: number, uncertainty = 0.0001) {
  const budget = [{ name: 'all', kind: 'B', uncertainty, degreesOfFreedom: Infinity }] as const;
  return measured('droop-resistance', 'resistance', value, budget, { step: 2 });
}

export const relationOf = (word: string) => inWords('earth-relation', word, { step: 1 });

const asked: readonly ToleranceEntry[] = [
  { finding: 'earth-relation', expected: { kind: 'becomes', word: 'isolated' } },
  { finding: 'droop-resistance', expected: { kind: 'within', limit: { kind: 'share', ratio: 0.2 } } },
];

/** What K1 was before its earth link was removed: bonded, with a droop of 18 mΩ. */
export function aBaseline(parts: Partial<Baseline> = {}): Baseline {
  const { interval } = droopOf(0.018);
  return {
    run: '20261101T080000Z-K1-acceptance',
    began: '2026-11-01T08:00:00.000Z',
    procedure: 'acceptance',
    modules: ['K1'],
    findings: [
      {
        name: 'earth-relation',
        value: 'bonded',
        dimension: null,
        standardUncertainty: null,
        interval: null,
        note: '',
      },
      {
        name: 'droop-resistance',
        value: 0.018,
        dimension: 'resistance',
        standardUncertainty: 0.0001,
        interval: interval === null ? null : [interval[0], interval[1]],
        note: '',
      },
    ],
    tolerance: { name: 'earth-link-removed', title: 'After removing the earth link', findings: [...asked] },
    ...parts,
  };
}
