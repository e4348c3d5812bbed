import { describe, expect, it } from 'vitest';

import { rootBetween } from '../../src/statistics/root-search.js';

describe('the search for a root', () => {
  it('finds it to the last digits, rising or falling', () => {
    const rising = rootBetween((x) => ({ value: x * x - 2, slope: 2 * x }), 0, 2);
    const falling = rootBetween((x) => ({ value: 2 - x * x, slope: -2 * x }), 0, 2);
    expect(rising).toBeCloseTo(Math.SQRT2, 15);
    expect(falling).toBeCloseTo(Math.SQRT2, 15);
  });

  it('ends where the slope misleads', () => {
    expect(
      rootBetween((x) => ({ value: Math.cbrt(x - 0.3), slope: Math.cbrt(x - 0.3) / -5 }), -1, 1),
    ).toBeCloseTo(0.3, 14);
    expect(rootBetween((x) => ({ value: x < 0.7 ? -1 : 1, slope: 0 }), 0, 1)).toBeCloseTo(0.7, 14);
  });

  it('takes an end that is the root', () => {
    expect(rootBetween((x) => ({ value: x, slope: 1 }), 0, 1)).toBe(0);
    expect(rootBetween((x) => ({ value: x - 1, slope: 1 }), 0, 1)).toBe(1);
  });

  it('refuses a bracket without a change of sign, rather than invent a root', () => {
    expect(() => rootBetween((x) => ({ value: x * x + 1, slope: 2 * x }), 0, 2)).toThrow(
      /no change of sign from 0 to 2/,
    );
    expect(() => rootBetween(() => ({ value: Number.NaN, slope: 1 }), 0, 2)).toThrow(/no change of sign/);
  });
});
