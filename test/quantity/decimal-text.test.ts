import { describe, expect, it } from 'vitest';
import { decimalExponent, product, shifted, shiftedText } from '../../src/quantity/decimal-text.js';
import fc from '../property.js';

describe('the decimal point moves in the text, and no digit changes', () => {
  it.each<[number, number, number | undefined, string]>([
    [0.035, 3, undefined, '35'],
    [15.21, 0, undefined, '15.21'],
    [15.2, 0, 4, '15.20'],
    [0.07, 2, undefined, '7'],
    [5, 3, undefined, '5000'],
    [123.4, -6, undefined, '0.0001234'],
    [-0.5, 3, undefined, '-500'],
    [1e-30, 0, undefined, '1e-30'],
    [1.5e30, 0, undefined, '1.5e30'],
    [0, 3, undefined, '0'],
  ])('%d by %d places', (value, places, significant, text) => {
    expect(shiftedText(value, places, significant)).toBe(text);
  });

  it('there and back is where it was', () => {
    const number = fc.double({ noNaN: true, noDefaultInfinity: true, min: -1e200, max: 1e200 });
    fc.assert(
      fc.property(number, fc.integer({ min: -9, max: 9 }), (value, places) => {
        fc.pre(value === 0 || Math.abs(value) > 1e-200);
        expect(Number(`${shiftedText(value, places)}e0`.replace(/(e-?\d+)e0$/, '$1'))).toBe(
          shifted(value, places),
        );
      }),
    );
  });
});

describe('a product of two decimals', () => {
  it('is the one that they are written to have', () => {
    expect(4.35 * 100).not.toBe(435);
    expect(product(4.35, 100)).toBe(435);
    expect(product(12.031, -0.001)).toBe(-0.012031);
    expect(product(0, -1)).toBe(0);
    expect(product(Number.POSITIVE_INFINITY, -2)).toBe(Number.NEGATIVE_INFINITY);
  });

  it('with a power of ten moves the point, and is within a rounding of what multiplying gives', () => {
    const number = fc.double({ noNaN: true, noDefaultInfinity: true, min: -1e100, max: 1e100 });
    fc.assert(
      fc.property(number, number, fc.integer({ min: -9, max: 9 }), (one, other, places) => {
        fc.pre(Math.min(Math.abs(one), Math.abs(other)) > 1e-100);
        expect(product(one, Number(`1e${places}`))).toBe(shifted(one, places));
        expect(Math.abs(product(one, other) / (one * other) - 1)).toBeLessThan(1e-15);
      }),
    );
  });
});

it('a percentage is not smeared by multiplying', () => {
  expect(0.07 * 100).not.toBe(7);
  expect(shifted(0.07, 2)).toBe(7);
  expect(shifted(Number.POSITIVE_INFINITY, 2)).toBe(Number.POSITIVE_INFINITY);
  expect(shifted(Number.NaN, 2)).toBeNaN();
});

it('the decade of a number is that of the rounded number', () => {
  expect(decimalExponent(0.0996, 2)).toBe(-1);
  expect(decimalExponent(0.0994, 2)).toBe(-2);
  expect(decimalExponent(15)).toBe(1);
  expect(decimalExponent(0)).toBe(0);
});
