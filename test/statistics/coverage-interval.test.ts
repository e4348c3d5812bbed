import { describe, expect, it } from 'vitest';
import { coverageInterval, medianOf } from '../../src/statistics/coverage-interval.js';
import { orderStatistic } from '../../src/statistics/order-statistic.js';
import { UnfitDataError } from '../../src/statistics/unfit-data-error.js';
import fc from '../property.js';

const numbers = fc
  .array(fc.oneof(fc.double({ min: -1e6, max: 1e6, noNaN: true }), fc.constantFrom(0, 1, 1e-12)), {
    minLength: 1,
    maxLength: 300,
  })
  .map((values) => values.map((value) => value + 0));

describe('the interval that draws lie in', () => {
  it('goes from the 250th to the 9750th of ten thousand (JCGM 101:2008, 7.7.2)', () => {
    const draws = Float64Array.from({ length: 10_000 }, (_, index) => ((index * 7919) % 10_000) + 1);
    expect(coverageInterval(draws)).toEqual({ low: 250, high: 9750 });
  });

  it('takes the integer part of (M − q + 1)/2 where (M − q)/2 is none (7.7.2)', () => {
    // M = 1001: q = 951, M − q = 50, r = 25. M = 1010: q = 960, r = 25. M = 1019: q = 968, M − q = 51, r = 26.
    const rising = (count: number) => Float64Array.from({ length: count }, (_, index) => index + 1);
    expect(coverageInterval(rising(1001))).toEqual({ low: 25, high: 976 });
    expect(coverageInterval(rising(1010))).toEqual({ low: 25, high: 985 });
    expect(coverageInterval(rising(1019))).toEqual({ low: 26, high: 994 });
  });

  it('is that of the sorted draws, equal and outlying ones among them, and counts only as many as it is told', () => {
    fc.assert(
      fc.property(numbers, fc.nat(20), (values, more) => {
        const sorted = Float64Array.from(values).sort();
        const covered = Math.floor(0.95 * values.length + 0.5);
        const first = Math.max(1, Math.floor((values.length - covered + 1) / 2));
        const draws = Float64Array.from([...values, ...new Array<number>(more).fill(Number.NaN)]);
        const { low, high } = coverageInterval(draws, values.length);
        expect(low).toBe(sorted[first - 1]);
        expect(high).toBe(sorted[Math.min(values.length, first + covered) - 1]);
      }),
    );
  });

  it('refuses no draws, or more than there are', () => {
    expect(() => coverageInterval(new Float64Array(0))).toThrow(UnfitDataError);
    expect(() => coverageInterval(new Float64Array(2), 3)).toThrow(UnfitDataError);
  });
});

describe('the median of draws', () => {
  it('has as many below as above', () => {
    expect(medianOf(Float64Array.of(9, 1, 5))).toBe(5);
    expect(medianOf(Float64Array.of(9, 1, 5, 7))).toBe(5);
  });
});

describe('an order statistic', () => {
  it('is the value at that place of the sorted ones', () => {
    fc.assert(
      fc.property(numbers, fc.nat(), (values, place) => {
        const at = place % values.length;
        expect(orderStatistic(Float64Array.from(values), at)).toBe(Float64Array.from(values).sort()[at]);
      }),
    );
  });
});
