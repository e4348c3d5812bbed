import { describe, expect, it } from 'vitest';

import { normalDistribution, normalQuantile } from '../../src/statistics/normal.js';
import { coverageFactor, studentTDistribution, studentTQuantile } from '../../src/statistics/student-t.js';
import fc from '../property.js';
import { relativeError } from './relative-error.js';

const freedom = fc.double({ min: 0.5, max: 2e6, noNaN: true });
const probability = fc.double({ min: 1e-9, max: 1 - 1e-9, noNaN: true });

describe("Student's t", () => {
  it('agrees with the closed forms for 1, 2 and 4 degrees of freedom', () => {
    for (const t of [-300, -12.7, -3, -0.5, -1e-5, 0.7, 2]) {
      expect(relativeError(studentTDistribution(t, 1), 0.5 + Math.atan(t) / Math.PI)).toBeLessThan(1e-12);
      expect(Math.abs(studentTDistribution(t, 2) - (0.5 + t / (2 * Math.sqrt(2 + t * t))))).toBeLessThan(
        1e-14,
      );
    }
    for (const p of [0.001, 0.025, 0.2, 0.4, 0.75, 0.975]) {
      expect(relativeError(studentTQuantile(p, 1), Math.tan(Math.PI * (p - 0.5)))).toBeLessThan(1e-12);
      const twoFold = (2 * p - 1) * Math.sqrt(1 / (2 * p * (1 - p)));
      expect(relativeError(studentTQuantile(p, 2), twoFold)).toBeLessThan(1e-12);
      const alpha = 4 * p * (1 - p);
      const q = Math.cos(Math.acos(Math.sqrt(alpha)) / 3) / Math.sqrt(alpha);
      const fourFold = Math.sign(p - 0.5) * 2 * Math.sqrt(q - 1);
      expect(relativeError(studentTQuantile(p, 4), fourFold)).toBeLessThan(1e-12);
    }
  });

  it('becomes the normal distribution at infinite degrees of freedom', () => {
    expect(studentTDistribution(-1.5, Infinity)).toBe(normalDistribution(-1.5));
    expect(studentTQuantile(0.31, Infinity)).toBe(normalQuantile(0.31));
    expect(coverageFactor(Infinity)).toBe(-normalQuantile((1 - 0.95) / 2));
  });

  // Computed with mpmath, 40 digits: root of the incomplete beta function, tail checked back to 1e-38.
  it.each([
    [0.025, 0.3, -6582.035699400774],
    [0.000001, 0.5, -102849115631.634],
    [0.0005, 4.7, -7.266542375825094],
    [0.26, 30.3, -0.6509267433328259],
    [0.025, 12345.6, -1.9601561582595106],
  ])('is right to 1e-11 for degrees of freedom that are not whole: p %f, %f', (p, dof, expected) => {
    expect(relativeError(studentTQuantile(p, dof), expected)).toBeLessThan(1e-11);
  });

  it('passes smoothly to its form for very many degrees of freedom', () => {
    for (const t of [-6, -2, -0.3]) {
      const below = studentTDistribution(t, 99_999.9);
      const above = studentTDistribution(t, 100_000.1);
      expect(relativeError(below, above)).toBeLessThan(1e-8);
    }
    expect(Math.abs(coverageFactor(99_999.999) - coverageFactor(100_000.001))).toBeLessThan(1e-10);
  });

  it('has a quantile that is the inverse of the distribution', () => {
    fc.assert(
      fc.property(probability, freedom, (p, dof) => {
        expect(relativeError(studentTDistribution(studentTQuantile(p, dof), dof), p)).toBeLessThan(1e-10);
      }),
    );
  });

  it('is symmetrical, and its quantile rises with the probability', () => {
    fc.assert(
      fc.property(probability, probability, freedom, (one, other, dof) => {
        expect(studentTDistribution(one, dof) + studentTDistribution(-one, dof)).toBeCloseTo(1, 14);
        const [low, high] = one < other ? [one, other] : [other, one];
        const [below, above] = [studentTQuantile(low, dof), studentTQuantile(high, dof)];
        expect(below).toBeLessThanOrEqual(above + 1e-11 * Math.abs(above));
      }),
    );
  });

  it('asks for a wider interval the fewer degrees of freedom there are', () => {
    fc.assert(
      fc.property(freedom, fc.double({ min: 1.01, max: 10, noNaN: true }), (dof, more) => {
        expect(coverageFactor(dof)).toBeGreaterThan(coverageFactor(dof * more));
      }),
    );
  });

  it('has defined ends', () => {
    expect(studentTDistribution(0, 3)).toBe(0.5);
    expect(studentTDistribution(-Infinity, 3)).toBe(0);
    expect(studentTDistribution(Infinity, 3)).toBe(1);
    expect(studentTQuantile(0, 3)).toBe(-Infinity);
    expect(studentTQuantile(0.5, 3)).toBe(0);
    expect(studentTQuantile(1, 3)).toBe(Infinity);
    expect(coverageFactor(3, 0)).toBe(0);
    expect(coverageFactor(3, 1)).toBe(Infinity);
    // The heaviest tails there are still end in a number.
    expect(studentTDistribution(-1e200, 0.5)).toBeGreaterThan(0);
  });

  it('refuses what it is not defined for', () => {
    expect(() => studentTDistribution(Number.NaN, 3)).toThrow(/NaN/);
    expect(() => studentTDistribution(1, 0)).toThrow(/0 degrees of freedom/);
    expect(() => studentTQuantile(1.1, 3)).toThrow(/not from 0 to 1/);
    expect(() => studentTQuantile(0.5, Number.NaN)).toThrow(/NaN degrees of freedom/);
    expect(() => coverageFactor(-1)).toThrow(/-1 degrees of freedom/);
    expect(() => coverageFactor(5, 95)).toThrow(/not from 0 to 1/);
  });
});
