import { describe, expect, it } from 'vitest';
import { thinned } from '../../../src/report/chart/thinned.js';
import fc from '../../property.js';

const point = fc.record({
  x: fc.double({ min: -100, max: 100, noNaN: true }),
  y: fc.double({ min: -1e6, max: 1e6, noNaN: true }),
});

describe('the points of a chart that has too many', () => {
  it('are all kept where they are few', () => {
    const few = [3, 1, 2].map((x) => ({ x, y: x }));
    expect(thinned(few, 2)).toEqual(few);
  });

  it('keep the lowest and the highest of each stretch, both ends, and their order', () => {
    fc.assert(
      fc.property(fc.array(point, { minLength: 50, maxLength: 400 }), (points) => {
        const kept = thinned(points, 10);
        expect(kept.length).toBeLessThanOrEqual(22);
        expect(points.filter((each) => kept.includes(each))).toEqual(kept);
        const xs = points.map(({ x }) => x);
        const [from, to] = [Math.min(...xs), Math.max(...xs)];
        expect(kept.map(({ x }) => x)).toEqual(expect.arrayContaining([from, to]));
        for (let stretch = 0; stretch < 10; stretch += 1) {
          const within = ({ x }: { readonly x: number }): boolean =>
            to > from ? Math.min(9, Math.floor(((x - from) / (to - from)) * 10)) === stretch : stretch === 0;
          const ys = points.filter(within).map(({ y }) => y);
          const left = kept.filter(within).map(({ y }) => y);
          if (ys.length === 0) continue;
          expect(left).toContain(Math.min(...ys));
          expect(left).toContain(Math.max(...ys));
        }
      }),
    );
  });

  it('lose no peak of one reading among a hundred thousand', () => {
    const many = Array.from({ length: 100_000 }, (_, x) => ({ x, y: x === 77_777 ? 9 : Math.sin(x) }));
    const kept = thinned(many, 150);
    expect(kept).toContainEqual({ x: 77_777, y: 9 });
    expect(kept.length).toBeLessThanOrEqual(302);
  });

  it('share the stretches of the whole chart where they are told it', () => {
    const heap = Array.from({ length: 1000 }, (_, index) => ({ x: 4 + index / 1e6, y: index % 7 }));
    expect(thinned(heap, 50, [0, 8]).length).toBeLessThanOrEqual(6);
    expect(thinned(heap, 50).length).toBeGreaterThan(50);
  });

  it('are left out where they have no place', () => {
    const points = [NaN, 1, Infinity].map((x) => ({ x, y: 1 })).concat({ x: 2, y: NaN });
    expect(thinned(points, 9)).toEqual([{ x: 1, y: 1 }]);
    expect(thinned([], 9)).toEqual([]);
    const low = { x: 1, y: Number.NEGATIVE_INFINITY };
    expect(thinned([low], 9)).toEqual([low]);
  });
});
