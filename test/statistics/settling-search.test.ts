import { describe, expect, it } from 'vitest';

import { curveOfRate, settlingPoints } from '../../src/statistics/settling-curve.js';
import { bestBentCurve, largestRate } from '../../src/statistics/settling-search.js';
import { soak } from './settling-soak.js';

describe('the search for the best settling curve', () => {
  it('ends where no rate nearby is better, whatever the scatter', () => {
    for (let seed = 1; seed <= 30; seed += 1) {
      const { t, y } = soak(0.2 * seed, seed, { noise: 4, points: 30 });
      const data = settlingPoints('test', t, y);
      const { curve } = bestBentCurve(data);
      for (let logarithm = -9; logarithm < Math.log(largestRate(data)); logarithm += 0.01) {
        const other = curveOfRate(data, Math.exp(logarithm)).sumOfSquares;
        // A line, towards which the lowest rates go, may do better than any minimum.
        const limit = Math.min(curve.sumOfSquares, curveOfRate(data, 1e-4).sumOfSquares);
        expect(other).toBeGreaterThanOrEqual(limit * (1 - 1e-12));
      }
    }
  });

  it('takes the fastest curve for a step', () => {
    const data = settlingPoints('test', [0, 1, 2, 3, 4], [0, 1.1, 1, 1.1, 1]);
    const { curve, isStep } = bestBentCurve(data);
    expect(isStep).toBe(true);
    expect(curve.rate).toBe(largestRate(data));
  });
});
