import { describe, expect, it } from 'vitest';

import { sortedPoints } from '../../src/statistics/sorted-points.js';
import fc from '../property.js';

describe('points in order', () => {
  it('are taken as they are when they ascend, and turned when they descend', () => {
    const x = Float64Array.of(1, 2, 2, 5);
    const y = Float64Array.of(4, 3, 2, 1);
    const sorted = sortedPoints(x, y);
    expect(sorted.x).toBe(x);
    expect(sorted.y).toBe(y);
    expect([...sortedPoints([3, 2, 1], [30, 20, 10]).y]).toEqual([10, 20, 30]);
  });

  it('keep each y with its x, and leave the data given alone', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: -20, max: 20 })), (places) => {
        const given = Object.freeze([...places]);
        const { x, y } = sortedPoints(
          given,
          given.map((place) => 2 * place),
        );
        expect([...x]).toEqual([...places].sort((one, other) => one - other));
        expect([...y]).toEqual([...x].map((place) => 2 * place));
      }),
    );
  });
});
