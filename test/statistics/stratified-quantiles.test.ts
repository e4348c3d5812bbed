import { describe, expect, it } from 'vitest';
import { stratifiedQuantiles } from '../../src/statistics/stratified-quantiles.js';
import { studentTQuantile } from '../../src/statistics/student-t.js';

describe('a distribution in strata', () => {
  it.each([Infinity, 200, 30, 9, 4, 2, 1])(
    'has the middle of each, with %d degrees of freedom',
    (freedom) => {
      const strata = 5000;
      const values = stratifiedQuantiles(strata, freedom);
      for (let index = 0; index < strata; index += 7) {
        const exact = studentTQuantile((index + 0.5) / strata, freedom);
        expect(Math.abs((values[index] ?? NaN) - exact)).toBeLessThanOrEqual(1e-4 * Math.abs(exact));
      }
    },
  );

  it('is symmetric about 0, which an odd number of them holds', () => {
    expect([...stratifiedQuantiles(3, Infinity)][1]).toBe(0);
    const values = [...stratifiedQuantiles(101, 5)];
    expect(values.toReversed()).toEqual(values.map((value) => 0 - value));
  });
});
