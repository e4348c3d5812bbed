import { describe, expect, it } from 'vitest';

import { fitAtSplit, heightOf, heightVariance } from '../../src/statistics/split-fit.js';

const x = Float64Array.of(0, 1, 2, 3, 4, 5);
const level = { meanX: 0, meanY: 0, slope: 0 };

describe('the fit at one gap', () => {
  it('puts the break where the pieces cross, when they cross in the gap', () => {
    const y = x.map((place) => Math.max(place - 2.25, 0));
    const fit = fitAtSplit({ x, y, ...level }, 3);
    expect(fit).toMatchObject({ placedBy: 'crossing', split: 3 });
    expect(fit.breakD).toBeCloseTo(2.25, 12);
    expect(fit.sumOfSquares).toBeCloseTo(0, 20);
  });

  it('joins the pieces at the better end of the gap when they cross elsewhere', () => {
    const y = x.map((place) => Math.max(place - 2.25, 0));
    const fit = fitAtSplit({ x, y, ...level }, 2);
    expect(fit).toMatchObject({ placedBy: 'point', breakD: 2 });
    expect(fit.crossingD).not.toBeCloseTo(2, 3);
    expect(heightOf(fit.left, 2)).toBeCloseTo(heightOf(fit.right, 2), 12);
  });

  it('counts distances from the first point, and heights from the overall line', () => {
    const y = x.map((place) => Math.max(place - 2.25, 0) + 3 * place + 7);
    const far = x.map((place) => place + 1000);
    const fit = fitAtSplit({ x: far, y, meanX: 1000, meanY: 7, slope: 3 }, 3);
    expect(fit.breakD).toBeCloseTo(2.25, 12);
    expect(fit.right.slope).toBeCloseTo(1, 12);
  });

  it('knows the variance of a height: least in the middle of the points', () => {
    const piece = { points: 4, meanD: 1.5, heightAtMean: 0, slope: 0, spreadD: 5 };
    expect(heightVariance(piece, 1.5)).toBe(0.25);
    expect(heightVariance(piece, 6.5)).toBe(5.25);
  });
});
