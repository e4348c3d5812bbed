import { describe, expect, it } from 'vitest';

import {
  mean,
  median,
  sampleStandardDeviation,
  UnfitDataError,
  type Values,
} from '../../src/statistics/checked.js';
import fc from '../property.js';
import { relativeError } from './relative-error.js';

const reading = fc.double({ min: -1e6, max: 1e6, noNaN: true });
const readings = fc.array(reading, { minLength: 2, maxLength: 40 });

describe('the checked statistics', () => {
  it('give the values of their examples', () => {
    expect(mean([1, 2, 6])).toBe(3);
    expect(relativeError(sampleStandardDeviation([2, 4, 4, 4, 5, 5, 7, 9]), 2.138089935299395)).toBeLessThan(
      1e-15,
    );
    expect(median([3, 1, 2])).toBe(2);
  });

  it.each<[string, (values: Values) => number]>([
    ['mean', mean],
    ['sampleStandardDeviation', sampleStandardDeviation],
    ['median', median],
  ])('%s refuses nothing, NaN and the infinite, and says which value it was', (name, calculate) => {
    expect(() => calculate([])).toThrow(new RegExp(`^${name} cannot be worked out: there are no values`));
    expect(() => calculate([1, Number.NaN, 3])).toThrow(/value 2 of 3 is NaN/);
    expect(() => calculate(Float64Array.of(1, 2, Infinity))).toThrow(/value 3 of 3 is Infinity/);
  });

  it('have an error with a stable code that counts as a fault of ours', () => {
    try {
      mean([]);
      expect.unreachable();
    } catch (error) {
      expect(error).toBeInstanceOf(UnfitDataError);
      expect(error).toMatchObject({
        code: 'UNFIT_DATA',
        exitCode: 70,
        calculation: 'mean',
        problem: 'there are no values',
      });
    }
  });

  it('take one value, but no scatter from it', () => {
    expect([mean([7]), median([7])]).toEqual([7, 7]);
    expect(() => sampleStandardDeviation([7])).toThrow(/one value has no scatter/);
  });

  it('keep a millivolt of scatter on an offset of a thousand million', () => {
    const offset = [0, 0.25, 0.5, 0.75].map((value) => 1e9 + value);
    expect(relativeError(sampleStandardDeviation(offset), Math.sqrt(5 / 48))).toBeLessThan(1e-12);
  });

  it('do not depend on the order of the values, and leave them alone', () => {
    fc.assert(
      fc.property(readings, (values) => {
        const given = Object.freeze([...values]);
        const turned = [...values].reverse();
        // A zero may come back with either sign.
        expect(Math.abs(median(given) - median(turned))).toBe(0);
        expect(Math.abs(mean(given) - mean(turned))).toBeLessThanOrEqual(1e-9);
      }),
    );
  });

  it('move with a shift and stretch with a scale', () => {
    fc.assert(
      fc.property(
        readings,
        fc.integer({ min: -1000, max: 1000 }),
        fc.integer({ min: 1, max: 64 }),
        (values, shift, scale) => {
          const moved = values.map((value) => value * scale + shift);
          expect(Math.abs(mean(moved) - (mean(values) * scale + shift))).toBeLessThan(1e-6);
          expect(Math.abs(median(moved) - (median(values) * scale + shift))).toBeLessThan(1e-6);
          expect(
            Math.abs(sampleStandardDeviation(moved) - sampleStandardDeviation(values) * scale),
          ).toBeLessThan(1e-6);
        },
      ),
    );
  });
});
