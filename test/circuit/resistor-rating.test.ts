import { describe, expect, it } from 'vitest';
import { resistorRating } from '../../src/circuit/resistor-rating.js';

describe('the rating of a resistor', () => {
  it('is twice what it bears in use, at least', () => {
    expect(resistorRating(0.8)).toBe(2);
    expect(resistorRating(1)).toBe(2);
    expect(resistorRating(1.01)).toBe(3);
  });

  it('covers the worst that it bears for a while without reserve', () => {
    expect(resistorRating(0.8, 2.5)).toBe(3);
    expect(resistorRating(0.8, 1.5)).toBe(2);
  });

  it('is not to be had where no usual one does', () => {
    expect(resistorRating(100)).toBe(200);
    expect(resistorRating(101)).toBeUndefined();
    expect(resistorRating(1, 201)).toBeUndefined();
  });
});
