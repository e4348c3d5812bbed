import { describe, expect, it } from 'vitest';

import {
  fitBrokenLine,
  predictBrokenLine,
  type BrokenLineFit,
} from '../../src/statistics/broken-line-fit.js';
import { fitLine } from '../../src/statistics/line-fit.js';
import fc from '../property.js';
import { leastByGrid, leastByGaps } from './broken-line-by-hand.js';
import { relativeError } from './relative-error.js';

// Whole numbers over a small range, so that equal x, single clusters and near-ties come up.
const points = fc.array(fc.tuple(fc.integer({ min: 0, max: 30 }), fc.integer({ min: -50, max: 50 })), {
  minLength: 5,
  maxLength: 40,
});

function fitOf(of: readonly (readonly [number, number])[]): BrokenLineFit | undefined {
  return fitBrokenLine(
    of.map(([x]) => x),
    of.map(([, y]) => y),
  );
}

/** A supply's curve: droop to the knee, then falling off, with a scatter that has no order in it. */
function curve(count: number, scatter: number, knee = 5.28) {
  const x = Float64Array.from({ length: count }, (_, index) => (6.3 * index) / (count - 1));
  const y = x.map((amps, index) => {
    const chance = Math.sin(index * 12.9898) * 43758.5453;
    return (
      15.21 - 0.018 * amps - 1.982 * Math.max(amps - knee, 0) + scatter * (chance - Math.floor(chance) - 0.5)
    );
  });
  return { x, y };
}

describe('the broken-line fit', () => {
  it('finds an exact break', () => {
    const fit = fitBrokenLine([0, 1, 2, 3, 4, 5], [0, 0, 0, 1, 2, 3]);
    expect(fit?.breakpoint).toBeCloseTo(2, 12);
    expect(fit?.left.slope).toBeCloseTo(0, 12);
    expect(fit?.right.slope).toBeCloseTo(1, 12);
    expect(fit?.improvementOverLine.p).toBeLessThan(1e-10);
  });

  it('reaches what solving every gap by hand reaches', () => {
    fc.assert(
      fc.property(points, (given) => {
        const fit = fitOf(given);
        const byHand = leastByGaps(given);
        if (fit === undefined) {
          // Too few points, or no break makes them lie closer than one line does.
          const gain = byHand === undefined ? 0 : byHand.sumOfSquaresOfLine - byHand.sumOfSquares;
          expect(gain).toBeLessThan(1e-9);
          return;
        }
        expect(Math.abs(fit.sumOfSquares - (byHand?.sumOfSquares ?? NaN))).toBeLessThan(
          1e-8 * (1 + fit.sumOfSquares),
        );
      }),
      { numRuns: 500 },
    );
  });

  it('is beaten by no break of a dense grid', () => {
    fc.assert(
      fc.property(points, (given) => {
        const fit = fitOf(given);
        if (fit !== undefined)
          expect(fit.sumOfSquares).toBeLessThanOrEqual(leastByGrid(given) * (1 + 1e-9) + 1e-9);
      }),
    );
  });

  it('leaves the residuals that it says, on a line that is whole', () => {
    fc.assert(
      fc.property(points, (given) => {
        const fit = fitOf(given);
        if (fit === undefined) return;
        const sum = given.reduce((total, [x, y]) => total + (y - predictBrokenLine(fit, x)) ** 2, 0);
        expect(Math.abs(sum - fit.sumOfSquares)).toBeLessThan(1e-7 * (1 + sum));
        for (const piece of [fit.left, fit.right]) {
          const height = piece.intercept + piece.slope * fit.breakpoint;
          expect(Math.abs(height - fit.valueAtBreak)).toBeLessThan(1e-6 * (1 + Math.abs(piece.slope)));
        }
      }),
    );
  });

  it('is no worse than one line, and keeps two different x on each side', () => {
    fc.assert(
      fc.property(points, (given) => {
        const fit = fitOf(given);
        if (fit === undefined) return;
        const x = given.map(([place]) => place);
        expect(fit.sumOfSquares).toBeLessThanOrEqual(
          fitLine(
            x,
            given.map(([, y]) => y),
          ).sumOfSquares + 1e-9,
        );
        expect(new Set(x.filter((place) => place <= fit.breakpoint)).size).toBeGreaterThanOrEqual(2);
        expect(new Set(x.filter((place) => place >= fit.breakpoint)).size).toBeGreaterThanOrEqual(2);
        expect(fit.left.points + fit.right.points).toBe(given.length);
      }),
    );
  });

  it('moves with shifts, stretches with scales, and takes the points in any order', () => {
    const { x, y } = curve(60, 0.01);
    const plain = fitBrokenLine(x, y);
    const order = [...x.keys()].sort((one, other) => Math.sin(one * 7.1) - Math.sin(other * 7.1));
    const changed = fitBrokenLine(
      order.map((index) => 3 * (x[index] ?? NaN) + 100),
      order.map((index) => 5 * (y[index] ?? NaN) - 7),
    );
    const turned = fitBrokenLine(x.toReversed(), y.toReversed());
    expect(turned).toEqual(plain);
    expect(changed?.breakpoint).toBeCloseTo(3 * (plain?.breakpoint ?? NaN) + 100, 9);
    expect(changed?.breakpointUncertainty).toBeCloseTo(3 * (plain?.breakpointUncertainty ?? NaN), 10);
    expect(changed?.right.slope).toBeCloseTo((5 / 3) * (plain?.right.slope ?? NaN), 9);
    expect(
      relativeError(changed?.improvementOverLine.f ?? NaN, plain?.improvementOverLine.f ?? NaN),
    ).toBeLessThan(1e-9);
  });

  it('turns left and right about when x is mirrored', () => {
    const { x, y } = curve(60, 0.01);
    const plain = fitBrokenLine(x, y);
    const mirrored = fitBrokenLine(
      x.map((amps) => -amps),
      y,
    );
    expect(mirrored?.breakpoint).toBeCloseTo(-(plain?.breakpoint ?? NaN), 11);
    expect(mirrored?.left.slope).toBeCloseTo(-(plain?.right.slope ?? NaN), 11);
    expect(mirrored?.right.slopeUncertainty).toBeCloseTo(plain?.left.slopeUncertainty ?? NaN, 12);
  });

  it('keeps its digits on offsets of a thousand million', () => {
    // Sixty-fourths, so that the shifted coordinates are exact.
    const whole = Array.from({ length: 40 }, (_, index) => index / 64);
    const height = whole.map((x, index) => (Math.round(64 * Math.max(x - 0.4, 0)) + (index % 3)) / 64);
    const plain = fitBrokenLine(whole, height);
    const far = fitBrokenLine(
      whole.map((x) => x + 1e9),
      height.map((y) => y - 1e9),
    );
    expect((far?.breakpoint ?? NaN) - 1e9).toBeCloseTo(plain?.breakpoint ?? NaN, 6);
    expect(relativeError(far?.right.slope ?? NaN, plain?.right.slope ?? NaN)).toBeLessThan(1e-5);
    expect(
      relativeError(far?.breakpointUncertainty ?? NaN, plain?.breakpointUncertainty ?? NaN),
    ).toBeLessThan(1e-4);
  });

  it('finds the knee among a million points, with and without scatter', () => {
    const noisy = curve(1_000_000, 0.01);
    const fit = fitBrokenLine(noisy.x, noisy.y);
    expect(Math.abs((fit?.breakpoint ?? NaN) - 5.28)).toBeLessThan(5 * (fit?.breakpointUncertainty ?? NaN));
    expect(fit?.breakpointUncertainty).toBeLessThan(1e-4);
    const exact = curve(1_000_000, 0);
    expect(Math.abs((fitBrokenLine(exact.x, exact.y)?.breakpoint ?? NaN) - 5.28)).toBeLessThan(1e-9);
  });

  it('covers the true knee as often as its uncertainty says', () => {
    let covered = 0;
    for (let trial = 0; trial < 200; trial += 1) {
      const knee = 4 + trial / 200;
      const { x, y } = curve(63 + trial, 0.01, knee);
      const fit = fitBrokenLine(x, y);
      if (fit !== undefined && Math.abs(fit.breakpoint - knee) < 2 * fit.breakpointUncertainty) covered += 1;
    }
    expect(covered).toBeGreaterThan(180);
  });

  it('weighs the improvement over one line by the two sums of squares', () => {
    const { x, y } = curve(60, 2);
    const fit = fitBrokenLine(x, y);
    const remaining = fit?.sumOfSquares ?? NaN;
    const f = (fitLine(x, y).sumOfSquares - remaining) / 2 / (remaining / 56);
    expect(relativeError(fit?.improvementOverLine.f ?? NaN, f)).toBeLessThan(1e-11);
    // For two degrees of freedom above, the F distribution has this closed form.
    expect(relativeError(fit?.improvementOverLine.p ?? NaN, (1 + (2 * f) / 56) ** -28)).toBeLessThan(1e-11);
  });

  it('says that a break found in mere scatter is no improvement to rely on', () => {
    const x = Array.from({ length: 200 }, (_, index) => index);
    const y = x.map(
      (index) => index * 0.01 + (curve(200, 1, 99).y[index] ?? NaN) + 0.018 * ((6.3 * index) / 199),
    );
    expect(fitBrokenLine(x, y)?.improvementOverLine.p).toBeGreaterThan(0.001);
  });

  it.each([
    ['no points', [], []],
    ['one point', [1], [1]],
    ['four points', [1, 2, 3, 4], [1, 2, 1, 2]],
    ['points at three places only', [1, 1, 2, 2, 3, 3], [1, 2, 5, 4, 3, 4]],
    ['points at one place', [1, 1, 1, 1, 1], [1, 2, 5, 4, 3]],
    ['points on one line', [0, 1, 2, 3, 4, 5], [0.1, 0.2, 0.3, 0.4, 0.5, 0.6]],
    ['points on one level', [0, 1, 2, 3, 4, 5], [7, 7, 7, 7, 7, 7]],
  ])('finds no break in %s', (_, x, y) => {
    expect(fitBrokenLine(x, y)).toBeUndefined();
  });

  it('refuses what is no number, however few there are', () => {
    expect(() => fitBrokenLine([Number.NaN], [1])).toThrow(/fitBrokenLine, x .* value 1 of 1 is NaN/);
    expect(() => fitBrokenLine([1, 2, 3, 4, 5, 6], [1, 2, 3, Number.NaN, 5, 6])).toThrow(
      /fitBrokenLine, y .* value 4 of 6 is NaN/,
    );
    expect(() => fitBrokenLine([1, 9, 3, Infinity, 5, 6], [1, 2, 3, 4, 5, 6])).toThrow(
      /fitBrokenLine, x .* is Infinity/,
    );
    expect(() => fitBrokenLine([1, 2], [1])).toThrow(/2 values of x and 1 of y/);
  });
});
