import { describe, expect, it } from 'vitest';
import { allowedInAir } from '../../src/analysis/ambient-line.js';
import fc from '../property.js';

const line = { fullTo: 40, fallingTo: 0.5, at: 60 };

describe('the load that is allowed in warm air', () => {
  it.each([
    [-20, 1],
    [40, 1],
    [55, 0.625],
    [60, 0.5],
    [60.01, 0],
    [100, 0],
  ])('at %d °C is %d: nothing beyond the end of the line', (temperature, expected) => {
    expect(allowedInAir(temperature, line)).toBe(expected);
  });

  it('never grows as the air warms', () => {
    const degrees = fc.double({ min: -40, max: 120, noNaN: true });
    const shares = fc.double({ min: 0, max: 1, noNaN: true });
    fc.assert(
      fc.property(degrees, degrees, shares, (one, other, fallingTo) => {
        const cooler = allowedInAir(Math.min(one, other), { ...line, fallingTo });
        const warmer = allowedInAir(Math.max(one, other), { ...line, fallingTo });
        expect(warmer).toBeLessThanOrEqual(cooler);
        expect(warmer).toBeGreaterThanOrEqual(0);
      }),
    );
  });
});
