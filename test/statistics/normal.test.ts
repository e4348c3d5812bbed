import { describe, expect, it } from 'vitest';

import {
  normalCentralProbability,
  normalDensity,
  normalDistribution,
  normalQuantile,
} from '../../src/statistics/normal.js';
import fc from '../property.js';
import { relativeError } from './relative-error.js';

const z = fc.double({ min: -8, max: 8, noNaN: true });

describe('the normal distribution', () => {
  // Computed with mpmath, 40 digits.
  it.each([
    [-37.5, 4.605353009581955e-308],
    [-20, 2.7536241186062337e-89],
    [-8, 6.220960574271784e-16],
    [-5, 2.866515718791939e-7],
    [-2.0000001, 0.022750126549083104],
    [-1.5, 0.06680720126885807],
    [0.3, 0.6179114221889527],
  ])('keeps its digits far out in the tail: z %f', (value, expected) => {
    expect(relativeError(normalDistribution(value), expected)).toBeLessThan(1e-14);
  });

  // Computed with mpmath, 40 digits.
  it.each([
    [1e-300, -37.0470962993612],
    [1e-20, -9.262340089798407],
    [0.001, -3.0902323061678136],
    [0.4999999, -2.5066282747031063e-7],
  ])('has a quantile to the last digits: p %d', (p, expected) => {
    // 0.4999999 is itself rounded, which counts ten million times as much near the middle.
    expect(relativeError(normalQuantile(p), expected)).toBeLessThan(1e-14);
  });

  it('gives the values of its examples', () => {
    expect(normalDistribution(-1.959963984540054)).toBeCloseTo(0.025, 16);
    expect(normalQuantile(0.975)).toBeCloseTo(1.959963984540054, 14);
  });

  it('is symmetrical, rises, and is undone by its quantile', () => {
    fc.assert(
      fc.property(z, z, (one, other) => {
        expect(normalDistribution(one) + normalDistribution(-one)).toBeCloseTo(1, 15);
        expect(normalDistribution(Math.min(one, other))).toBeLessThanOrEqual(
          normalDistribution(Math.max(one, other)),
        );
        expect(normalCentralProbability(one)).toBeCloseTo(normalDistribution(one) - 0.5, 15);
        const below = -Math.abs(one);
        expect(Math.abs(normalQuantile(normalDistribution(below)) - below)).toBeLessThan(1e-13);
      }),
    );
  });

  it('has its density as the slope', () => {
    for (const place of [-3, -1, 0, 0.5, 2.5]) {
      const slope = (normalDistribution(place + 1e-5) - normalDistribution(place - 1e-5)) / 2e-5;
      expect(relativeError(normalDensity(place), slope)).toBeLessThan(1e-7);
    }
  });

  it('has defined ends, and refuses what is no probability', () => {
    expect([normalDistribution(-Infinity), normalDistribution(0), normalDistribution(Infinity)]).toEqual([
      0, 0.5, 1,
    ]);
    expect([normalQuantile(0), normalQuantile(1)]).toEqual([-Infinity, Infinity]);
    expect(Math.abs(normalQuantile(0.5))).toBe(0);
    expect(() => normalDistribution(Number.NaN)).toThrow(/NaN/);
    expect(() => normalQuantile(-0.1)).toThrow(/not from 0 to 1/);
    expect(() => normalQuantile(Number.NaN)).toThrow(/not from 0 to 1/);
  });
});
