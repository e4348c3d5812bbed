import { describe, expect, it } from 'vitest';
import { parseQuantity } from '../../src/quantity/parse-quantity.js';
import { roundedDown } from '../../src/quantity/rounded-down.js';
import fc from '../property.js';

describe('a number rounded down', () => {
  it.each([
    [3.999, '3.99 A'],
    [7.6, '7.60 A'],
    [0.0999, '99.9 mA'],
    [12.349, '12.3 A'],
    [0, '0 A'],
  ])('writes %f A as %s', (value, text) => {
    expect(roundedDown(value, 'current')).toBe(text);
  });

  it('never says more than there is, and keeps three digits of it', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-3, max: 1e3, noNaN: true }), (value) => {
        const said = parseQuantity(roundedDown(value, 'current'), 'current');
        expect(said).toBeLessThanOrEqual(value * (1 + 1e-10));
        expect(said).toBeGreaterThan(value * 0.989);
      }),
    );
  });
});
