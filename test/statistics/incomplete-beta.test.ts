import { describe, expect, it } from 'vitest';

import { regularisedIncompleteBeta } from '../../src/statistics/incomplete-beta.js';
import fc from '../property.js';
import { relativeError } from './relative-error.js';

const share = fc.double({ min: 0.001, max: 0.999, noNaN: true });
const shape = fc.double({ min: 0.2, max: 500, noNaN: true });

describe('the incomplete beta function', () => {
  it('has closed forms where one argument is 1, and at two halves', () => {
    for (const x of [0.01, 0.3, 0.5, 0.9]) {
      expect(relativeError(regularisedIncompleteBeta(x, 7.5, 1), x ** 7.5)).toBeLessThan(1e-13);
      expect(relativeError(regularisedIncompleteBeta(x, 1, 7.5), 1 - (1 - x) ** 7.5)).toBeLessThan(1e-13);
      const arc = (2 / Math.PI) * Math.asin(Math.sqrt(x));
      expect(relativeError(regularisedIncompleteBeta(x, 0.5, 0.5), arc)).toBeLessThan(1e-13);
    }
  });

  it('is what the other side leaves', () => {
    fc.assert(
      fc.property(share, shape, shape, (x, a, b) => {
        const both = regularisedIncompleteBeta(x, a, b) + regularisedIncompleteBeta(1 - x, b, a, x);
        expect(both).toBeCloseTo(1, 11);
      }),
    );
  });

  it('has defined ends, and refuses what lies outside', () => {
    expect([regularisedIncompleteBeta(0, 2, 3), regularisedIncompleteBeta(1, 2, 3)]).toEqual([0, 1]);
    expect(() => regularisedIncompleteBeta(1.1, 2, 3)).toThrow(/x is 1.1/);
    expect(() => regularisedIncompleteBeta(0.5, 0, 3)).toThrow(/a is 0/);
    expect(() => regularisedIncompleteBeta(Number.NaN, 2, 3)).toThrow(/x is NaN/);
  });
});
