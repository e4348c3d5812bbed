import { describe, expect, it } from 'vitest';
import { expandedOf, inWords, measured } from '../../src/analysis/finding.js';

describe('a measured finding', () => {
  it('combines its contributions and covers 95 % at the effective degrees of freedom', () => {
    const budget = [
      { name: 'scatter', kind: 'A', uncertainty: 0.3, degreesOfFreedom: 4 },
      { name: 'promise', kind: 'B', uncertainty: 0.4, degreesOfFreedom: Infinity },
    ] as const;
    const found = measured('droop-resistance', 'resistance', 10, budget, { step: 2 });
    expect(found.standardUncertainty).toBeCloseTo(0.5, 12);
    // Welch–Satterthwaite: 0.5⁴/(0.3⁴/4) = 30.9; between the 2.042 of 30 and the 2.021 of 40 degrees of
    // freedom in JCGM 100:2008, Table G.2.
    const [low, high] = found.interval ?? [NaN, NaN];
    expect((high - low) / 2 / 0.5).toBeGreaterThan(2.021);
    expect((high - low) / 2 / 0.5).toBeLessThan(2.042);
    expect((high + low) / 2).toBeCloseTo(10, 12);
    expect(found).toMatchObject({ note: '', step: 2, budget, factors: [] });
  });
});

describe('one number for an interval', () => {
  it.each([
    [10, [9, 11], 1],
    [10, [9, 14], 4],
    [10, [4, 11], 6],
    ['hiccup', null, null],
    [10, null, null],
  ] as const)('of %j within %j is %j: never less than either side', (value, interval, expanded) => {
    expect(expandedOf({ value, interval })).toBe(expanded);
  });
});

describe('a finding in words', () => {
  it('has no unit, no uncertainty and no interval', () => {
    expect(inWords('limit-style', 'hiccup', { step: 3, note: 'again and again' })).toEqual({
      name: 'limit-style',
      value: 'hiccup',
      dimension: null,
      standardUncertainty: null,
      interval: null,
      step: 3,
      note: 'again and again',
      budget: [],
      factors: [],
    });
  });
});
