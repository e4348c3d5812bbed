import { describe, expect, it } from 'vitest';

import { curveOfRate, reversed, settlingPoints, shapeAt } from '../../src/statistics/settling-curve.js';
import fc from '../property.js';
import { soak } from './settling-soak.js';

const rate = fc.double({ min: 1e-4, max: 50, noNaN: true });
const place = fc.double({ min: 0, max: 1, noNaN: true });

describe('the settling curve of one rate', () => {
  it('has a shape that is a line at rate 0, and goes over into it', () => {
    fc.assert(
      fc.property(place, (s) => {
        expect(shapeAt(0, s).shape).toBe(s);
        expect(shapeAt(0, s).turn).toBe(-(s * s) / 2);
        expect(Math.abs(shapeAt(1e-9, s).shape - s)).toBeLessThan(1e-9);
        expect(Math.abs(shapeAt(1e-9, s).turn + (s * s) / 2)).toBeLessThan(1e-9);
      }),
    );
  });

  it('turns as its shape changes with the rate', () => {
    fc.assert(
      fc.property(rate, place, (of, s) => {
        const width = 1e-4 * of;
        const difference = (shapeAt(of + width, s).shape - shapeAt(of - width, s).shape) / (2 * width);
        // Central difference: an error of the square of the width, and what the subtraction loses.
        expect(Math.abs(shapeAt(of, s).turn - difference)).toBeLessThan(1e-7 * (s * s) + 1e-15 / width);
      }),
    );
  });

  it('does not jump where the series takes over', () => {
    for (const s of [1, 0.3]) {
      const [series, closed] = [shapeAt(0.25 / s, s).turn, shapeAt((0.25 / s) * (1 + 1e-15), s).turn];
      expect(Math.abs(series / closed - 1)).toBeLessThan(2e-14);
    }
  });

  it('leaves a sum of squares whose derivative by the rate is what it says', () => {
    const { t, y } = soak(1.5, 1);
    const data = settlingPoints('test', t, y);
    for (const of of [0.3, 1, 1.4, 1.6, 4]) {
      const { gradient, pull } = curveOfRate(data, of);
      const width = 1e-4;
      const change = curveOfRate(data, of + width).sumOfSquares - curveOfRate(data, of - width).sumOfSquares;
      expect(Math.abs(change / (2 * width) / (-2 * gradient * pull) - 1)).toBeLessThan(1e-4);
    }
  });

  it('runs the same points backwards', () => {
    const data = settlingPoints('test', [0, 1, 1, 4], [1, 2, 3, 5]);
    const back = reversed(data);
    expect([...back.places]).toEqual([0, 0.75, 0.75, 1]);
    expect([...back.heights]).toEqual([...data.heights].reverse());
    expect([data.secondPlace, back.secondPlace]).toEqual([0.25, 0.75]);
  });
});
