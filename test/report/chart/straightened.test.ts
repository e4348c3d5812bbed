import { describe, expect, it } from 'vitest';
import { type Place, straightened } from '../../../src/report/chart/straightened.js';
import fc from '../../property.js';

describe('a straightened line', () => {
  it('keeps only the ends of a straight one, and every corner', () => {
    const straight = Array.from({ length: 100 }, (_, index): Place => [index, 2 * index]);
    expect(straightened(straight, 0.1)).toEqual([straight[0], straight[99]]);
    const corner: readonly Place[] = [...straight, [100, 150], [101, 100]];
    expect(straightened(corner, 0.1)).toContainEqual([99, 198]);
  });

  it('keeps a jump at one place', () => {
    const jump: readonly Place[] = [
      [0, 0],
      [1, 0],
      [1, 5],
      [2, 5],
    ];
    expect(straightened(jump, 0.1)).toEqual(jump);
  });

  it('is nowhere further off than it may be', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 0, max: 100 }), { minLength: 2, maxLength: 60 }), (ys) => {
        const places = ys.map((y, x): Place => [x, y]);
        const kept = straightened(places, 3);
        for (const [x, y] of places) {
          const after = Math.max(
            1,
            kept.findIndex(([each]) => each >= x),
          );
          const [x0, y0] = kept[after - 1] ?? [NaN, NaN];
          const [x1, y1] = kept[after] ?? [NaN, NaN];
          expect(Math.abs(y0 + ((y1 - y0) * (x - x0)) / (x1 - x0) - y)).toBeLessThanOrEqual(3 + 1e-9);
        }
      }),
    );
  });
});
