import { describe, expect, it } from 'vitest';
import { currentAtRise, riseAt } from '../../src/analysis/loss-model.js';
import fc from '../property.js';

const seen = { current: 4, rise: 40 };

describe('a rise at another current', () => {
  it.each([
    [0, 2, 10],
    [0, 5, 62.5],
    [0.2, 2, 16],
    [0.2, 0, 8],
    [1, 8, 40],
  ])('with %d of the losses fixed is, at %d A, %d K', (fixed, current, rise) => {
    expect(riseAt(current, seen, { fixed })).toBeCloseTo(rise, 12);
  });

  const shares = fc.double({ min: 0, max: 1, noNaN: true });

  it('is the same at the soaked current, whatever the model', () => {
    fc.assert(
      fc.property(shares, (fixed) => {
        expect(riseAt(4, seen, { fixed })).toBeCloseTo(40, 10);
      }),
    );
  });

  it('upwards is never more than without fixed losses, downwards never less', () => {
    fc.assert(
      fc.property(shares, fc.double({ min: 0, max: 12, noNaN: true }), (fixed, current) => {
        const difference = riseAt(current, seen, { fixed }) - riseAt(current, seen, { fixed: 0 });
        expect(difference * (4 - current)).toBeGreaterThanOrEqual(-1e-9);
      }),
    );
  });

  it('upwards without fixed losses is no less than for losses in proportion to the current, too', () => {
    expect(riseAt(5, seen, { fixed: 0 })).toBeGreaterThan(40 * (5 / 4));
    expect(riseAt(3, seen, { fixed: 0 })).toBeLessThan(40 * (3 / 4));
  });
});

describe('the current of a rise', () => {
  it('is the inverse', () => {
    const shares = fc.double({ min: 0, max: 0.95, noNaN: true });
    fc.assert(
      fc.property(shares, fc.double({ min: 0.1, max: 12, noNaN: true }), (fixed, current) => {
        expect(currentAtRise(riseAt(current, seen, { fixed }), seen, { fixed })).toBeCloseTo(current, 6);
      }),
    );
  });

  it.each([
    ['none where the fixed losses alone make more', 7, 0.2, 0],
    ['none where it may not warm at all', 0, 0, 0],
    ['none below the air around it', -5, 0, 0],
    ['none where nothing but fixed losses is too much', 39, 1, 0],
    ['endless where fixed losses are all and few enough', 41, 1, Number.POSITIVE_INFINITY],
  ])('is %s', (_, rise, fixed, current) => {
    expect(currentAtRise(rise, seen, { fixed })).toBe(current);
  });

  it('is endless for what did not warm', () => {
    expect(currentAtRise(10, { current: 4, rise: 0 }, { fixed: 0 })).toBe(Number.POSITIVE_INFINITY);
    expect(currentAtRise(-1, { current: 4, rise: 0 }, { fixed: 0 })).toBe(0);
  });
});
