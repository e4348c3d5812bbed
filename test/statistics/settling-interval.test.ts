import { describe, expect, it } from 'vitest';

import { fitSettling } from '../../src/statistics/settling-fit.js';
import { settledInterval } from '../../src/statistics/settling-interval.js';
import { coverageFactor } from '../../src/statistics/student-t.js';
import { relativeError } from './relative-error.js';
import { settlingOf, soak, type Soak } from './settling-soak.js';

/** The least sum of squares of curves that end at one value: by a fine grid of time constants, then halving. */
function leastEndingAt({ t, y }: Soak, settled: number): number {
  const at = (logarithm: number) => {
    const left = t.map((time) => Math.exp(-time / Math.exp(logarithm)));
    const squares = left.reduce((sum, of) => sum + of * of, 0);
    const toGo = left.reduce((sum, of, index) => sum + of * ((y[index] ?? NaN) - settled), 0) / squares;
    return left.reduce((sum, of, index) => sum + ((y[index] ?? NaN) - settled - toGo * of) ** 2, 0);
  };
  let best = 0;
  for (let logarithm = 2; logarithm < 14; logarithm += 0.01) {
    if (at(logarithm) < at(best)) best = logarithm;
  }
  for (let step = 0.01; step > 1e-9; step /= 2) {
    for (const next of [best - step, best + step]) if (at(next) < at(best)) best = next;
  }
  return at(best);
}

describe('the interval of the settled value', () => {
  it.each([1.5, 2, 5])(
    'holds the truth as often as it says, cut short after %s time constants',
    (watched) => {
      let covered = 0;
      for (let seed = 1; seed <= 400; seed += 1) {
        const { t, y } = soak(watched, 1000 * watched + seed);
        const [low, high] = settledInterval(t, y, settlingOf(t, y));
        if (low <= 56 && 56 <= high) covered += 1;
      }
      expect(covered / 400).toBeGreaterThanOrEqual(0.92);
      expect(covered / 400).toBeLessThanOrEqual(0.98);
    },
  );

  it.each([0.95, 0.68, 0.99])('ends where curves get too bad, for a fraction of %s', (fraction) => {
    const data = soak(1, 11, { noise: 0.5, points: 30 });
    const fit = settlingOf(data.t, data.y);
    const rise = coverageFactor(fit.degreesOfFreedom, fraction) ** 2 / fit.degreesOfFreedom;
    for (const end of settledInterval(data.t, data.y, fit, fraction)) {
      expect(relativeError(leastEndingAt(data, end), fit.sumOfSquares * (1 + rise))).toBeLessThan(1e-9);
    }
  });

  it('reaches further to where the value goes when the soak was cut short', () => {
    const { t, y } = soak(0.4, 12);
    const fit = settlingOf(t, y);
    const [low, high] = settledInterval(t, y, fit);
    expect(high - fit.settled).toBeGreaterThan(1.1 * (fit.settled - low));
  });

  it('is that of the covariance when the soak was long', () => {
    const { t, y } = soak(8, 13);
    const fit = settlingOf(t, y);
    const half = coverageFactor(fit.degreesOfFreedom) * fit.settledUncertainty;
    const [low, high] = settledInterval(t, y, fit);
    expect(relativeError(fit.settled - low, half)).toBeLessThan(0.01);
    expect(relativeError(high - fit.settled, half)).toBeLessThan(0.01);
  });

  it('has no end where the data do not tell the curve from a line, and says which side', () => {
    let seen = 0;
    for (let seed = 1; seed <= 60; seed += 1) {
      const { t, y } = soak(0.15, seed);
      const outcome = fitSettling(t, y);
      if (outcome.kind !== 'settling') continue;
      const [low, high] = settledInterval(t, y, outcome, 0.9999);
      if (high !== Infinity) continue;
      seen += 1;
      expect(low).toBeGreaterThan(25);
      expect(low).toBeLessThan(outcome.settled);
      const downward = y.map((of) => -of);
      const mirrored = settledInterval(t, downward, settlingOf(t, downward), 0.9999);
      expect(mirrored[0]).toBe(-Infinity);
      expect(relativeError(mirrored[1], -low)).toBeLessThan(1e-9);
    }
    expect(seen).toBeGreaterThan(5);
  });

  it('holds the truth too when the soak is so short that one end is open', () => {
    let covered = 0;
    let settling = 0;
    for (let seed = 1; seed <= 400; seed += 1) {
      const { t, y } = soak(0.3, 5000 + seed, { noise: 0.3 });
      const outcome = fitSettling(t, y);
      if (outcome.kind !== 'settling') continue;
      settling += 1;
      const [low, high] = settledInterval(t, y, outcome);
      if (low <= 56 && 56 <= high) covered += 1;
    }
    expect(settling).toBeGreaterThan(300);
    expect(covered / settling).toBeGreaterThanOrEqual(0.92);
  });

  it('shrinks to a point for exact readings', () => {
    for (const timeConstant of [0.1, 0.2, 1, 10, 100, 1000]) {
      const t = Array.from({ length: 50 }, (_, index) => index);
      const y = t.map((time) => 7 - 5 * Math.exp(-time / timeConstant));
      const [low, high] = settledInterval(t, y, settlingOf(t, y));
      expect(low).toBeCloseTo(7, 9);
      expect(high).toBeCloseTo(7, 9);
    }
  });

  it('refuses what is no number', () => {
    const { t, y } = soak(2, 14);
    const fit = settlingOf(t, y);
    expect(() => settledInterval(t, y.with(3, Number.NaN), fit)).toThrow(/settledInterval, y .* value 4/);
    expect(() => settledInterval(t, y, fit, 2)).toThrow(/the fraction is 2/);
  });
});
