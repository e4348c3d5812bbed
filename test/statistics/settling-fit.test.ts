import { describe, expect, it } from 'vitest';

import { fitSettling } from '../../src/statistics/settling-fit.js';
import { coverageFactor } from '../../src/statistics/student-t.js';
import fc from '../property.js';
import { relativeError } from './relative-error.js';
import { asSettling, settlingOf, soak, type Soak } from './settling-soak.js';

function sumOfSquares({ t, y }: Soak, settled: number, start: number, timeConstant: number): number {
  return t.reduce((sum, time, index) => {
    const curve = settled + (start - settled) * Math.exp(-time / timeConstant);
    return sum + ((y[index] ?? NaN) - curve) ** 2;
  }, 0);
}

/** The best of a dense grid of time constants, with the 2 × 2 normal equations written out for each. */
function leastByGrid({ t, y }: Soak): number {
  let least = Infinity;
  const n = t.length;
  for (let exponent = -2; exponent <= 4; exponent += 0.002) {
    const left = t.map((time) => Math.exp(-time / (600 * 10 ** exponent)));
    const sum = (of: (index: number) => number) => left.reduce((total, _, index) => total + of(index), 0);
    const [z, zz] = [sum((index) => left[index] ?? NaN), sum((index) => (left[index] ?? NaN) ** 2)];
    const [all, zy] = [
      sum((index) => y[index] ?? NaN),
      sum((index) => (left[index] ?? NaN) * (y[index] ?? NaN)),
    ];
    const change = (n * zy - z * all) / (n * zz - z * z);
    const settled = (all - change * z) / n;
    least = Math.min(least, sumOfSquares({ t, y }, settled, settled + change, 600 * 10 ** exponent));
  }
  return least;
}

describe('the settling fit', () => {
  it('finds an exact settling, as in its example', () => {
    const fit = settlingOf([0, 1, 2, 3], [0, 8, 12, 14]);
    expect(fit.settled).toBeCloseTo(16, 12);
    expect(fit.start).toBeCloseTo(0, 12);
    expect(fit.timeConstant).toBeCloseTo(1 / Math.LN2, 12);
    expect(fit).toMatchObject({ degreesOfFreedom: 1, points: 4, startTime: 0 });
  });

  it.each([0.1, 0.2, 1, 10, 100, 1000, 10_000])(
    'finds a time constant of %s in fifty exact readings a second apart',
    (timeConstant) => {
      const t = Array.from({ length: 50 }, (_, index) => index);
      const fit = settlingOf(
        t,
        t.map((time) => 7 - 5 * Math.exp(-time / timeConstant)),
      );
      expect(relativeError(fit.timeConstant, timeConstant)).toBeLessThan(1e-9);
      expect(relativeError(fit.settled, 7)).toBeLessThan(1e-9);
      expect(fit.start).toBeCloseTo(2, 12);
    },
  );

  it('is beaten by no time constant of a dense grid', () => {
    for (let seed = 1; seed <= 20; seed += 1) {
      const data = soak(0.4 + seed / 4, seed, { noise: 0.3, points: 25 });
      const fit = settlingOf(data.t, data.y);
      expect(fit.sumOfSquares).toBeLessThanOrEqual(leastByGrid(data) * (1 + 1e-12));
    }
  });

  it('is beaten by no neighbour in any direction', () => {
    const data = soak(1.5, 1);
    const fit = settlingOf(data.t, data.y);
    const nudge = fc.double({ min: -1, max: 1, noNaN: true });
    fc.assert(
      fc.property(nudge, nudge, nudge, (settled, start, timeConstant) => {
        const other = sumOfSquares(
          data,
          fit.settled + settled * fit.settledUncertainty,
          fit.start + start * fit.startUncertainty,
          fit.timeConstant + timeConstant * fit.timeConstantUncertainty,
        );
        expect(other).toBeGreaterThanOrEqual(fit.sumOfSquares * (1 - 1e-12));
      }),
    );
  });

  it('has the covariance of the Jacobian written out', () => {
    const { t, y } = soak(1.5, 2, { points: 30 });
    const fit = settlingOf(t, y);
    const rows = t.map((time) => {
      const left = Math.exp(-time / fit.timeConstant);
      return [1 - left, left, ((fit.start - fit.settled) * left * time) / fit.timeConstant ** 2] as const;
    });
    const squares = [0, 1, 2].map((one) =>
      [0, 1, 2].map((other) => rows.reduce((sum, row) => sum + (row[one] ?? NaN) * (row[other] ?? NaN), 0)),
    );
    // The covariance times the squares of the Jacobian is the residual variance, times the unit matrix.
    for (const one of [0, 1, 2] as const) {
      for (const other of [0, 1, 2] as const) {
        const sum = fit.covariance[one].reduce(
          (total, of, k) => total + of * (squares[k]?.[other] ?? NaN),
          0,
        );
        const scale = Math.sqrt(fit.covariance[one][one] * (squares[other]?.[other] ?? NaN));
        const unit = one === other ? fit.residualDeviation ** 2 : 0;
        expect(Math.abs(sum - unit)).toBeLessThan(1e-10 * fit.residualDeviation * scale);
      }
    }
  });

  it('moves with shifts, stretches with scales, and takes the readings in any order', () => {
    const { t, y } = soak(2, 3);
    const plain = settlingOf(t, y);
    const order = [...t.keys()].sort((one, other) => Math.sin(one * 7.1) - Math.sin(other * 7.1));
    const changed = asSettling(
      fitSettling(
        order.map((index) => 3 * (t[index] ?? NaN) + 1000),
        order.map((index) => -5 * (y[index] ?? NaN) + 7),
        { startTime: 1000 },
      ),
    );
    expect(relativeError(changed.settled, -5 * plain.settled + 7)).toBeLessThan(1e-11);
    expect(relativeError(changed.start, -5 * plain.start + 7)).toBeLessThan(1e-11);
    expect(relativeError(changed.timeConstant, 3 * plain.timeConstant)).toBeLessThan(1e-11);
    expect(relativeError(changed.settledUncertainty, 5 * plain.settledUncertainty)).toBeLessThan(1e-10);
    expect(relativeError(changed.timeConstantUncertainty, 3 * plain.timeConstantUncertainty)).toBeLessThan(
      1e-10,
    );
    expect(changed.residualCorrelation).toBeCloseTo(plain.residualCorrelation, 9);
  });

  it('tells the value when the load came on, though the first reading was later', () => {
    const { t, y } = soak(3, 4);
    const late = settlingOf(t.slice(10), y.slice(10));
    expect(Math.abs(late.start - 21)).toBeLessThan(3 * late.startUncertainty);
    const atReading = asSettling(fitSettling(t.slice(10), y.slice(10), { startTime: t[10] ?? NaN }));
    // The curve at the first reading: its start, less what has settled since.
    const gone = Math.exp(-(t[10] ?? NaN) / late.timeConstant);
    expect(relativeError(late.settled + (late.start - late.settled) * gone, atReading.start)).toBeLessThan(
      1e-12,
    );
  });

  it('covers the settled value, the start and the time constant as often as it says', () => {
    for (const timeConstants of [1.5, 2, 5]) {
      const covered = { settled: 0, start: 0, timeConstant: 0 };
      for (let seed = 1; seed <= 400; seed += 1) {
        const { t, y } = soak(timeConstants, 1000 * timeConstants + seed);
        const fit = settlingOf(t, y);
        const factor = coverageFactor(fit.degreesOfFreedom);
        if (Math.abs(fit.settled - 56) <= factor * fit.settledUncertainty) covered.settled += 1;
        if (Math.abs(fit.start - 21) <= factor * fit.startUncertainty) covered.start += 1;
        if (Math.abs(fit.timeConstant - 600) <= factor * fit.timeConstantUncertainty)
          covered.timeConstant += 1;
      }
      for (const hits of Object.values(covered)) {
        expect(hits / 400).toBeGreaterThanOrEqual(0.92);
        expect(hits / 400).toBeLessThanOrEqual(0.98);
      }
    }
  });

  it('shows by its residuals where one exponential is not the whole truth', () => {
    const { t, y } = soak(3, 5);
    const twoFold = y.map((of, index) => of - 5 * Math.exp(-(t[index] ?? NaN) / 60));
    expect(Math.abs(settlingOf(t, y).residualCorrelation)).toBeLessThan(0.3);
    expect(settlingOf(t, twoFold).residualCorrelation).toBeGreaterThan(0.7);
  });

  it('reads typed arrays without changing them, thousands at once', () => {
    const { t, y } = soak(2, 6, { points: 5000 });
    const times = Float64Array.from(t);
    const fit = settlingOf(times, Float64Array.from(y));
    expect(Math.abs(fit.settled - 56)).toBeLessThan(4 * fit.settledUncertainty);
    expect([...times]).toEqual(t);
  });

  it('refuses what is no number, and a start that is out of reach', () => {
    expect(() => fitSettling([0, 1, Number.NaN], [1, 2, 3])).toThrow(/fitSettling, t .* value 3 of 3 is NaN/);
    expect(() => fitSettling([0, 1, 2], [1, Infinity, 3])).toThrow(
      /fitSettling, y .* value 2 of 3 is Infinity/,
    );
    expect(() => fitSettling([0, 1, 2], [1, 2])).toThrow(/3 values of x and 2 of y/);
    expect(() => fitSettling([0, 1, 2, 3], [0, 8e200, 12e200, 14e200])).toThrow(/overflow/);
    expect(() => fitSettling([2000, 2001, 2002, 2003], [0, 8, 12, 14])).toThrow(
      /time constants before the first/,
    );
  });
});
