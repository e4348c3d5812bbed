import { describe, expect, it } from 'vitest';
import { measured } from '../../src/analysis/finding.js';
import type { ToleranceEntry } from '../../src/record/baseline.js';
import { comparisonAsJson } from '../../src/report/comparison-json.js';
import { bonded, damaged, recordOf, recordsOf } from './compared-records.js';

const json = (...records: Parameters<typeof recordsOf>) =>
  JSON.parse(JSON.stringify(comparisonAsJson(recordsOf(...records)))) as Record<string, unknown> & {
    readonly findings: readonly Record<string, unknown>[];
  };

describe('a comparison for a program', () => {
  const whole = json(recordOf('before', bonded), recordOf('after', damaged));

  it('names its format, both records and the outcome', () => {
    expect(whole).toMatchObject({
      format: 'railproof/compare 1',
      before: { run: 'before', modules: ['K1'], procedure: 'real-limit', ended: 'completed', reason: null },
      after: { run: 'after', integrity: { kind: 'whole' } },
      sameModules: true,
      tolerance: { name: 'earth-link-removed', title: 'After removing the earth link' },
      outcome: 'does-not-conform',
      inNeither: ['limit-style'],
    });
  });

  it('gives each finding with its units, difference, E_n and verdict', () => {
    expect(whole.findings).toEqual([
      {
        name: 'earth-relation',
        before: {
          value: 'bonded',
          unit: null,
          standardUncertainty: null,
          interval: null,
          bound: null,
          note: '',
        },
        after: expect.objectContaining({ value: 'isolated', unit: null }) as object,
        difference: null,
        normalizedError: null,
        expected: { kind: 'becomes', word: 'isolated' },
        tolerance: null,
        verdict: 'changed',
        outcome: 'conforms',
        probability: null,
        note: '',
      },
      {
        name: 'droop-resistance',
        before: expect.objectContaining({ value: 0.018, unit: 'Ohm', standardUncertainty: 0.0001 }) as object,
        after: expect.objectContaining({ value: 0.036 }) as object,
        difference: {
          value: expect.closeTo(0.018, 12) as number,
          unit: 'Ohm',
          standardUncertainty: expect.closeTo(0.0001414, 7) as number,
          expandedUncertainty: expect.closeTo(0.0002772, 7) as number,
          coverage: 0.95,
          share: expect.closeTo(100, 9) as number,
        },
        normalizedError: expect.closeTo(64.94, 2) as number,
        expected: { kind: 'within' },
        tolerance: { value: expect.closeTo(0.0036, 12) as number, unit: 'Ohm' },
        verdict: 'changed',
        outcome: 'does-not-conform',
        probability: expect.closeTo(0, 12) as number,
        note: '',
      },
    ]);
  });

  it('gives ratios in %, and what only one record has beside null', () => {
    const budget = [{ name: 'all', kind: 'B', uncertainty: 0, degreesOfFreedom: Infinity }] as const;
    const regulation = (value: number) => measured('load-regulation', 'ratio', value, budget, { step: 2 });
    const tolerance: readonly ToleranceEntry[] = [
      {
        finding: 'load-regulation',
        expected: { kind: 'within', limit: { kind: 'absolute', value: 0.002 } },
      },
    ];
    const both = json(recordOf('a', [regulation(0.005)]), recordOf('b', [regulation(0.006)]), tolerance);
    expect(both.findings[0]).toMatchObject({
      before: { value: 0.5, unit: '%' },
      difference: { value: expect.closeTo(0.1, 12) as number, unit: '%' },
      tolerance: { value: 0.2, unit: '%' },
      normalizedError: null,
      verdict: 'unchanged-within-tolerance',
    });
    const one = json(recordOf('a', [regulation(0.005)]), recordOf('b', []), tolerance);
    expect(one.findings[0]).toMatchObject({ after: null, difference: null, verdict: 'only-before' });
  });
});
