import { describe, expect, it } from 'vitest';
import { judgeAgainstBaseline } from '../../src/judgement/against-baseline.js';
import { judge, overall } from '../../src/judgement/judge.js';
import { headerOf } from '../analysis/evidence-of.js';
import { aBaseline, droopOf, relationOf } from './a-baseline.js';

const header = { ...headerOf(), baseline: aBaseline() };

describe('a record with a baseline', () => {
  it('of a module that is as it should be conforms, and says by how much it moved', () => {
    expect(judgeAgainstBaseline(header, [relationOf('isolated'), droopOf(0.0181)])).toEqual([
      {
        finding: 'earth-relation',
        requirement: 'becomes isolated (bonded in the baseline)',
        outcome: 'conforms',
        probability: null,
        note: 'from bonded to isolated',
      },
      {
        finding: 'droop-resistance',
        requirement: 'unchanged within 20 % of the baseline (18.00 mΩ)',
        outcome: 'conforms',
        probability: expect.closeTo(1, 9) as number,
        note: 'moved by +100 ± 280 µΩ (+0.56 %)',
      },
    ]);
  });

  it('of a damaged module does not conform, and says which finding moved and by how much', () => {
    const decisions = judge(header, [relationOf('isolated'), droopOf(0.036)]);
    expect(overall(decisions)).toBe('does-not-conform');
    expect(decisions[1]).toMatchObject({
      finding: 'droop-resistance',
      outcome: 'does-not-conform',
      note: 'moved by +18.00 ± 0.28 mΩ (+100 %)',
    });
  });

  it('lacks what was not found now, or never', () => {
    expect(judgeAgainstBaseline(header, [relationOf('isolated')])).toMatchObject([
      { finding: 'earth-relation', outcome: 'conforms' },
      { finding: 'droop-resistance', outcome: 'undecided', note: 'was not found this time' },
    ]);
    const empty = { ...header, baseline: aBaseline({ findings: [] }) };
    expect(judgeAgainstBaseline(empty, [])).toEqual([
      {
        finding: 'earth-relation',
        requirement: 'becomes isolated',
        outcome: 'undecided',
        probability: null,
        note: 'was not found, neither now nor in the baseline',
      },
    ]);
  });

  it('of which nothing is asked decides nothing, nor does one without', () => {
    const tolerance = { name: 'x', title: 'X', findings: [] };
    const free = { ...header, baseline: aBaseline({ tolerance }) };
    expect(judgeAgainstBaseline(free, [droopOf(0.036)])).toEqual([]);
    expect(judgeAgainstBaseline(headerOf(), [droopOf(0.036)])).toEqual([]);
  });
});

describe('a criterion that refers to the baseline', () => {
  const criteria = [
    {
      finding: 'droop-resistance',
      requirement: {
        kind: 'at-most' as const,
        value: { kind: 'share' as const, ratio: 1.2, of: 'baseline' },
      },
    },
  ];
  const free = aBaseline({ tolerance: { name: 'x', title: 'X', findings: [] } });

  // The limit is 1.2·18 mΩ = 21.6 mΩ; the guard band 1.96·√(0.1² + (1.2·0.1)²) = 0.306 mΩ.
  it.each([
    [0.0212, 'conforms'],
    [0.0214, 'undecided'],
    [0.0218, 'undecided'],
    [0.022, 'does-not-conform'],
  ])('at most 120 %% of it: %d Ω %s', (value, outcome) => {
    expect(judge({ ...headerOf({ criteria }), baseline: free }, [droopOf(value)])).toEqual([
      expect.objectContaining({
        requirement: 'at most 21.6 mΩ (120 % of baseline)',
        outcome,
        note: 'the limit was measured too, and its uncertainty counts',
      }),
    ]);
  });

  it('is undecided without one, and says so', () => {
    expect(judge(headerOf({ criteria }), [droopOf(0.018)])).toEqual([
      {
        finding: 'droop-resistance',
        requirement: 'at most 120 % of baseline',
        outcome: 'undecided',
        probability: null,
        note: 'no baseline was given: run with --baseline <run>',
      },
    ]);
  });

  it('is undecided where the baseline does not hold it', () => {
    const baseline = { ...free, findings: [] };
    expect(judge({ ...headerOf({ criteria }), baseline }, [droopOf(0.018)])).toMatchObject([
      { outcome: 'undecided', note: 'the baseline does not hold it' },
    ]);
  });

  it.each([
    ['at-most', 0.02, 'conforms'],
    ['at-most', 0.03, 'undecided'],
    ['at-least', 0.03, 'undecided'],
    ['at-least', 0.02, 'does-not-conform'],
  ] as const)('that is only a least value: %s, %d Ω %s', (kind, value, outcome) => {
    const least = free.findings.map((finding) => ({ ...finding, bound: 'least' as const }));
    const required = criteria.map(({ finding, requirement }) => ({
      finding,
      requirement: { ...requirement, kind },
    }));
    const decisions = judge({ ...headerOf({ criteria: required }), baseline: { ...free, findings: least } }, [
      droopOf(value),
    ]);
    expect(decisions).toMatchObject([{ outcome }]);
  });
});
