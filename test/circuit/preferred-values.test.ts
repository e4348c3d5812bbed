import { describe, expect, it } from 'vitest';
import published from '../../fixtures/reference/e-series.json' with { type: 'json' };
import { nextPreferred, preferredFrom, preferredSeries } from '../../src/circuit/preferred-values.js';
import { UnfitDataError } from '../../src/statistics/unfit-data-error.js';
import fc from '../property.js';

describe('the preferred values', () => {
  // Source: IEC 60063, as in fixtures/reference/e-series.json (public tables).
  it.each(preferredSeries)('are those of the standard: %s', (series) => {
    expect([...preferredFrom(1, 9.999, series)]).toEqual(published[series]);
  });

  it.each(preferredSeries)('are the same in every decade, and read as one would write them: %s', (series) => {
    const milli = published[series].map((value) => Number(`${value}e-3`));
    expect([...preferredFrom(0.001, 0.00999, series)]).toEqual(milli);
  });
});

describe('the next preferred value', () => {
  it.each([
    [0.048, 'E12', 0.056],
    [0.047, 'E12', 0.047],
    [0.0471, 'E6', 0.068],
    [0.0091, 'E24', 0.0091],
    [0.0092, 'E24', 0.01],
    [7, 'E6', 10],
    [1000, 'E6', 1000],
    [4700, 'E12', 4700],
  ] as const)('for %d in %s is %d', (value, series, expected) => {
    expect(nextPreferred(value, series)).toBe(expected);
  });

  it('counts what arithmetic has lost: three times 0.1 is still 0.3', () => {
    expect(nextPreferred(0.1 * 3, 'E24')).toBe(0.3);
    expect(nextPreferred(0.1 + 0.2, 'E24')).toBe(0.3);
  });

  it('is never below what was asked for, and never far above', () => {
    const values = fc.double({ min: 1e-9, max: 1e9, noNaN: true });
    fc.assert(
      fc.property(values, fc.constantFrom(...preferredSeries), (value, series) => {
        const next = nextPreferred(value, series);
        const widest = { E6: 1.54, E12: 1.26, E24: 1.16 }[series];
        expect(next).toBeGreaterThanOrEqual(value * (1 - 1e-8));
        expect(next).toBeLessThan(value * widest);
        expect(nextPreferred(next, series)).toBe(next);
      }),
    );
  });

  it.each([0, -1, Number.NaN, Number.POSITIVE_INFINITY])('is refused for %d', (value) => {
    expect(() => nextPreferred(value, 'E12')).toThrow(UnfitDataError);
  });
});
