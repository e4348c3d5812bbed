import { describe, expect, it } from 'vitest';

import { logBeta, logGamma } from '../../src/statistics/log-gamma.js';
import { relativeError } from './relative-error.js';

describe('the logarithm of the gamma function', () => {
  it('is that of the factorials, and of the root of pi', () => {
    let factorial = 1;
    for (let n = 1; n <= 20; n += 1) {
      expect(Math.abs(logGamma(n) - Math.log(factorial))).toBeLessThan(1e-14 * (1 + Math.log(factorial)));
      factorial *= n;
    }
    expect(relativeError(logGamma(0.5), Math.log(Math.PI) / 2)).toBeLessThan(1e-14);
  });

  it('follows its own recurrence across the place where the series begins', () => {
    for (const z of [0.001, 0.7, 8.9, 9.3, 9.999, 10, 123.4]) {
      expect(Math.abs(logGamma(z + 1) - logGamma(z) - Math.log(z))).toBeLessThan(
        1e-13 * (1 + Math.abs(logGamma(z))),
      );
    }
  });
});

describe('the logarithm of the beta function', () => {
  it('is exact where one argument is 1', () => {
    for (const a of [0.2, 3, 9.99, 10, 5e5, 1e12]) {
      expect(Math.abs(logBeta(a, 1) + Math.log(a))).toBeLessThan(1e-14 * (1 + Math.log(1 + a)));
    }
  });

  it('does not depend on the order, and loses nothing at a million', () => {
    expect(logBeta(2.5, 40)).toBe(logBeta(40, 2.5));
    // B(a, 1/2)·B(a + 1/2, 1/2) = π/a, whatever a.
    expect(Math.abs(logBeta(1e6, 0.5) + logBeta(1e6 + 0.5, 0.5) - Math.log(Math.PI / 1e6))).toBeLessThan(
      1e-14,
    );
  });
});
