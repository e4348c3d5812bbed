import { describe, expect, it } from 'vitest';

import { mean, sampleStandardDeviation } from '../../src/statistics/checked.js';
import { momentsWidth, RunningMoments } from '../../src/statistics/running-moments.js';
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

  it('that are added together are those of all values, in whatever parts they came', () => {
    const parts = fc.array(fc.array(fc.double({ min: -1e4, max: 1e4, noNaN: true }), { maxLength: 20 }), {
      maxLength: 8,
    });
    fc.assert(
      fc.property(parts, (given) => {
        const together = new RunningMoments();
        for (const part of given) together.addAll(momentsOf(part));
        const whole = momentsOf(given.flat());
        expect(together.count).toBe(whole.count);
        if (whole.count === 0) return;
        expect(Math.abs(together.mean - whole.mean)).toBeLessThan(1e-9);
        expect([together.minimum, together.maximum]).toEqual([whole.minimum, whole.maximum]);
        expect(Math.abs((together.sampleDeviation ?? 0) - (whole.sampleDeviation ?? 0))).toBeLessThan(1e-7);
      }),
    );
  });

  it('added to none are the same to the last digit, and none added to them change nothing', () => {
    const values = [15.21, 15.19, 15.2, 15.17];
    const moments = new RunningMoments();
    moments.addAll(momentsOf(values));
    moments.addAll(new RunningMoments());
    const { count, mean, sampleVariance } = momentsOf(values);
    expect([moments.count, moments.mean, moments.sampleVariance]).toEqual([count, mean, sampleVariance]);
  });

  it('keep a small scatter on a large offset when they are added together', () => {
    const moments = momentsOf([1e9, 1e9 + 0.25]);
    moments.addAll(momentsOf([1e9 + 0.5, 1e9 + 0.75]));
    expect(relativeError(moments.sampleVariance ?? NaN, 5 / 48)).toBeLessThan(1e-12);
  });

  it('written as numbers come back the same to the last digit, and go on from there', () => {
    fc.assert(
      fc.property(readings, fc.double({ min: -1e4, max: 1e4, noNaN: true }), (values, next) => {
        const row = new Float64Array(momentsWidth + 2);
        momentsOf(values).writeTo(row, 1);
        const back = RunningMoments.readFrom(row, 1);
        back.add(next);
        const { count, mean, sampleVariance, minimum, maximum } = momentsOf([...values, next]);
        expect([back.count, back.mean, back.sampleVariance, back.minimum, back.maximum]).toEqual([
          count,
          mean,
          sampleVariance,
          minimum,
          maximum,
        ]);
        expect([row[0], row.at(-1)]).toEqual([0, 0]);
      }),
    );
  });
});
