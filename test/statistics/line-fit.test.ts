import { describe, expect, it } from 'vitest';

import { fitLine, predictLine, TooFewPointsError } from '../../src/statistics/line-fit.js';
import fc from '../property.js';
import { relativeError } from './relative-error.js';

const coordinate = fc.integer({ min: -2000, max: 2000 }).map((value) => value / 64);
const scattered = fc
  .array(fc.tuple(coordinate, coordinate), { minLength: 3, maxLength: 40 })
  .filter((points) => new Set(points.map(([x]) => x)).size > 1);

function fitOf(points: readonly (readonly [number, number])[]) {
  return fitLine(
    points.map(([x]) => x),
    points.map(([, y]) => y),
  );
}

describe('the straight-line fit', () => {
  it('finds an exact line, with no uncertainty', () => {
    const fit = fitLine([0, 1, 2, 3], [1, 3, 5, 7]);
    expect(fit).toMatchObject({
      slope: 2,
      intercept: 1,
      residualDeviation: 0,
      slopeUncertainty: 0,
      degreesOfFreedom: 2,
    });
  });

  it('leaves residuals that no other line makes smaller', () => {
    fc.assert(
      fc.property(
        scattered,
        fc.double({ min: -1, max: 1, noNaN: true }),
        fc.double({ min: -1, max: 1, noNaN: true }),
        (points, turn, lift) => {
          const fit = fitOf(points);
          const other = points.reduce(
            (sum, [x, y]) => sum + (y - (fit.intercept + lift) - (fit.slope + turn) * x) ** 2,
            0,
          );
          expect(fit.sumOfSquares).toBeLessThanOrEqual(other * (1 + 1e-12) + 1e-9);
        },
      ),
    );
  });

  it('agrees with the normal equations written out', () => {
    fc.assert(
      fc.property(scattered, (points) => {
        const fit = fitOf(points);
        const n = points.length;
        const sum = (of: (x: number, y: number) => number) =>
          points.reduce((total, [x, y]) => total + of(x, y), 0);
        const [sx, sy] = [sum((x) => x), sum((_, y) => y)];
        const determinant = n * sum((x) => x * x) - sx * sx;
        const slope = (n * sum((x, y) => x * y) - sx * sy) / determinant;
        // Coordinates are whole 64ths: these sums are exact.
        expect(Math.abs(fit.slope - slope)).toBeLessThan(1e-9 * (1 + Math.abs(slope)));
        const variance = fit.sumOfSquares / (n - 2);
        expect(Math.abs(fit.slopeUncertainty ** 2 - (n * variance) / determinant)).toBeLessThan(
          1e-9 * (1 + fit.slopeUncertainty ** 2),
        );
        expect(
          Math.abs(fit.interceptUncertainty ** 2 - (variance * sum((x) => x * x)) / determinant),
        ).toBeLessThan(1e-9 * (1 + fit.interceptUncertainty ** 2));
      }),
    );
  });

  it('moves with shifts, stretches with scales, and takes the points in any order', () => {
    fc.assert(
      fc.property(
        scattered,
        coordinate,
        coordinate,
        fc.integer({ min: 1, max: 32 }),
        (points, dx, dy, scale) => {
          const fit = fitOf(points);
          const changed = fitOf([...points].reverse().map(([x, y]) => [x + dx, y * scale + dy] as const));
          const close = (actual: number, expected: number) => {
            expect(Math.abs(actual - expected)).toBeLessThan(1e-7 * (1 + Math.abs(expected)));
          };
          close(changed.slope, fit.slope * scale);
          close(changed.intercept, fit.intercept * scale + dy - fit.slope * scale * dx);
          close(changed.slopeUncertainty, fit.slopeUncertainty * scale);
          close(changed.sumOfSquares, fit.sumOfSquares * scale ** 2);
        },
      ),
    );
  });

  it('keeps all its digits on offsets of a thousand million', () => {
    const x = [0, 0.5, 1, 1.5, 2, 2.5];
    const y = [1, 1.25, 2, 2.25, 3.5, 3.25];
    const plain = fitLine(x, y);
    const far = fitLine(
      x.map((value) => value + 1e9),
      y.map((value) => value + 1e9),
    );
    expect(relativeError(far.slope, plain.slope)).toBeLessThan(1e-14);
    expect(relativeError(far.sumOfSquares, plain.sumOfSquares)).toBeLessThan(1e-6);
    expect(relativeError(far.slopeUncertainty, plain.slopeUncertainty)).toBeLessThan(1e-6);
    expect(predictLine(far, 1e9 + 1).value - 1e9).toBeCloseTo(predictLine(plain, 1).value, 5);
  });

  it('correlates intercept and slope by the places of the points', () => {
    const fit = fitLine([1, 2, 3, 4], [2, 1, 4, 3]);
    expect(
      relativeError(fit.correlation, fit.covariance / (fit.interceptUncertainty * fit.slopeUncertainty)),
    ).toBeLessThan(1e-14);
    expect(fitLine([-1, 0, 1], [0, 1, 0]).correlation).toBeCloseTo(0, 15);
  });

  it('predicts with the uncertainty that the covariance gives', () => {
    const fit = fitLine([1, 2, 3, 4, 6], [2, 1, 4, 3, 5]);
    for (const x of [-3, 0, 3.2, 40]) {
      const { value, uncertainty } = predictLine(fit, x);
      const variance =
        fit.interceptUncertainty ** 2 + (x * fit.slopeUncertainty) ** 2 + 2 * x * fit.covariance;
      expect(value).toBeCloseTo(fit.intercept + fit.slope * x, 12);
      expect(relativeError(uncertainty ** 2, variance)).toBeLessThan(1e-12);
    }
  });

  it('reads typed arrays without changing them', () => {
    const x = Float64Array.of(3, 1, 2);
    expect(fitLine(x, Float64Array.of(6, 2, 4)).slope).toBe(2);
    expect([...x]).toEqual([3, 1, 2]);
  });

  it.each([
    ['no points', [], []],
    ['one point', [1], [1]],
    ['two points', [1, 2], [1, 2]],
    ['all points at one place', [0.1, 0.1, 0.1, 0.1], [1, 2, 3, 4]],
  ])('says that %s are too few', (_, x, y) => {
    expect(() => fitLine(x, y)).toThrow(TooFewPointsError);
    expect(() => fitLine(x, y)).toThrow(
      expect.objectContaining({ code: 'TOO_FEW_POINTS', exitCode: 65, points: x.length }) as Error,
    );
  });

  it('refuses what is no number, and x and y that do not belong together', () => {
    expect(() => fitLine([1, 2, Number.NaN], [1, 2, 3])).toThrow(
      /fitLine, x cannot be worked out: value 3 of 3 is NaN/,
    );
    expect(() => fitLine([1, 2, 3], [1, Infinity, 3])).toThrow(/fitLine, y .* value 2 of 3 is Infinity/);
    expect(() => fitLine([1, 2, 3], [1, 2])).toThrow(/3 values of x and 2 of y/);
    expect(() => fitLine([1e200, 2e200, -3e200], [1, 2, 3])).toThrow(/overflow/);
  });
});
