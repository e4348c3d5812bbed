import { describe, expect, it } from 'vitest';

import { mean, sampleStandardDeviation } from '../../src/statistics/checked.js';
import { RunningMoments } from '../../src/statistics/running-moments.js';
import fc from '../property.js';
import { relativeError } from './relative-error.js';

const readings = fc.array(fc.double({ min: -1e4, max: 1e4, noNaN: true }), { minLength: 2, maxLength: 60 });

function momentsOf(values: readonly number[]): RunningMoments {
  const moments = new RunningMoments();
  for (const value of values) moments.add(value);
  return moments;
}

describe('running moments', () => {
  it('give the mean of their example', () => {
    expect(momentsOf([15.21, 15.19, 15.2]).mean).toBeCloseTo(15.2, 12);
  });

  it('agree with the same values kept and worked out at the end', () => {
    fc.assert(
      fc.property(readings, (values) => {
        const moments = momentsOf(values);
        const deviation = sampleStandardDeviation(values);
        expect(moments.count).toBe(values.length);
        expect(Math.abs(moments.mean - mean(values))).toBeLessThan(1e-9);
        expect(Math.abs((moments.sampleDeviation ?? NaN) - deviation)).toBeLessThan(1e-8);
        expect(
          Math.abs((moments.uncertaintyOfMean ?? NaN) - deviation / Math.sqrt(values.length)),
        ).toBeLessThan(1e-8);
        expect(moments.minimum).toBe(Math.min(...values));
        expect(moments.maximum).toBe(Math.max(...values));
      }),
    );
  });

  it('keep a small scatter on a large offset', () => {
    const moments = momentsOf([1e9, 1e9 + 0.25, 1e9 + 0.5, 1e9 + 0.75]);
    expect(relativeError(moments.sampleVariance ?? NaN, 5 / 48)).toBeLessThan(1e-12);
  });

  it('have no mean or extremes of nothing, and no scatter of one', () => {
    const nothing = new RunningMoments();
    expect(nothing.count).toBe(0);
    expect(() => nothing.mean).toThrow(/there are no values/);
    expect(() => nothing.minimum).toThrow(/there are no values/);
    expect(() => nothing.maximum).toThrow(/there are no values/);
    expect(nothing.sampleVariance).toBeUndefined();
    const one = momentsOf([-3]);
    expect([one.mean, one.minimum, one.maximum]).toEqual([-3, -3, -3]);
    expect([one.sampleVariance, one.sampleDeviation, one.uncertaintyOfMean]).toEqual([
      undefined,
      undefined,
      undefined,
    ]);
  });

  it('refuse a value that is none, and are the same afterwards', () => {
    const moments = momentsOf([1, 3]);
    expect(() => {
      moments.add(Number.NaN);
    }).toThrow(/value 3 is NaN/);
    expect(() => {
      moments.add(-Infinity);
    }).toThrow(/value 3 is -Infinity/);
    expect([moments.count, moments.mean, moments.sampleVariance]).toEqual([2, 2, 2]);
  });
});
