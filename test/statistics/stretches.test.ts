import { describe, expect, it } from 'vitest';

import { cutInStretches, leastSquares, momentsKept } from '../../src/statistics/stretches.js';
import { fitLine } from '../../src/statistics/line-fit.js';
import fc from '../property.js';

const points = fc.array(fc.tuple(fc.integer({ min: 0, max: 40 }), fc.integer({ min: -50, max: 50 })), {
  minLength: 8,
  maxLength: 60,
});

describe('the data cut in stretches', () => {
  it('say on both sides of each border what a line through that side leaves', () => {
    fc.assert(
      fc.property(points, fc.integer({ min: 1, max: 9 }), (given, length) => {
        const sorted = [...given].sort(([one], [other]) => one - other);
        const x = Float64Array.from(sorted, ([place]) => place);
        const y = Float64Array.from(sorted, ([, height]) => height);
        const borders = Int32Array.from(
          { length: Math.ceil((x.length - 7) / length) },
          (_, index) => 4 + index * length,
        );
        const stretches = cutInStretches({ x, y, meanX: 3, meanY: -2, slope: 0.5 }, borders);
        borders.forEach((border, index) => {
          for (const [part, moments] of [
            [[0, border], stretches.left],
            [[border, x.length], stretches.right],
          ] as const) {
            const places = x.slice(...part);
            if (places.length < 3 || new Set(places).size < 2) continue;
            const expected = fitLine(places, y.slice(...part)).sumOfSquares;
            expect(Math.abs(leastSquares(moments, momentsKept * index) - expected)).toBeLessThan(
              1e-9 * (1 + expected) + 1e-8,
            );
          }
        });
      }),
    );
  });

  it('know the sums of squares of all, about the mean and about the level', () => {
    const x = Float64Array.of(0, 1, 2, 3, 4);
    const y = Float64Array.of(1, 5, 2, 8, 4);
    const stretches = cutInStretches({ x, y, meanX: 0, meanY: 0, slope: 0 }, Int32Array.of(2, 3));
    expect(stretches.sumOfSquares).toBeCloseTo(30, 12);
    expect(stretches.sumAboutLevel).toBeCloseTo(110, 12);
  });
});
