import { describe, expect, it } from 'vitest';

import { bestSplit } from '../../src/statistics/break-search.js';
import { fitLine } from '../../src/statistics/line-fit.js';
import { fitAtSplit } from '../../src/statistics/split-fit.js';

/** A bent line with a scatter that has no order in it, over many stretches of the search. */
function bent(count: number, knee: number, scatter: number) {
  const x = Float64Array.from({ length: count }, (_, index) => index / count);
  const y = x.map((place, index) => {
    const chance = Math.sin(index * 78.233) * 12543.123;
    return Math.max(place - knee, 0) + scatter * (chance - Math.floor(chance) - 0.5);
  });
  return { x, y, meanX: 0, meanY: 0, slope: 0 };
}

describe('the search for the break', () => {
  it.each([
    ['early', 0.06, 0.02],
    ['in the middle', 0.5, 0.02],
    ['late', 0.95, 0.02],
    ['hardly there', 0.4, 0.5],
    ['not there', 2, 0.1],
  ])('overlooks no gap when it rules out whole stretches: break %s', (_, knee, scatter) => {
    const points = bent(1500, knee, scatter);
    const { split, sumOfSquaresOfLine } = bestSplit(points, 2, 1498);
    let least = Infinity;
    for (let gap = 2; gap <= 1498; gap += 1) least = Math.min(least, fitAtSplit(points, gap).sumOfSquares);
    expect(split).toBeDefined();
    expect(fitAtSplit(points, split ?? 0).sumOfSquares).toBeLessThanOrEqual(least * (1 + 1e-11));
    const lineLeaves = fitLine(points.x, points.y).sumOfSquares;
    expect(least).toBeLessThan(lineLeaves);
    expect(sumOfSquaresOfLine).toBeGreaterThanOrEqual(lineLeaves);
  });

  it('stays within the splits allowed', () => {
    const points = bent(300, 0.1, 0.001);
    expect(bestSplit(points, 200, 250).split).toBe(200);
    expect(bestSplit(points, 20, 25).split).toBe(25);
    expect(bestSplit(points, 77, 77).split).toBe(77);
  });

  it('finds none where no gap is allowed', () => {
    const x = Float64Array.of(0, 1, 1, 2);
    expect(bestSplit({ x, y: x, meanX: 0, meanY: 0, slope: 0 }, 2, 2).split).toBeUndefined();
  });
});
