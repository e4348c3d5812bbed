import { describe, expect, it } from 'vitest';
import { type Spread, latinHypercube } from '../../src/statistics/latin-hypercube.js';
import { randomFrom } from '../../src/statistics/random.js';
import { UnfitDataError } from '../../src/statistics/unfit-data-error.js';

const draws = 1000;
const normal: Spread = { kind: 'normal', deviation: 1 };

function drawn(name: string, spread: Spread, seed = 1): Float64Array {
  const column = new Float64Array(draws);
  latinHypercube(draws, randomFrom(seed)).add(column, name, spread);
  return column;
}

function mean(values: ArrayLike<number>): number {
  return Array.from(values).reduce((sum, value) => sum + value, 0) / values.length;
}

function correlation(one: Float64Array, other: Float64Array): number {
  const product = mean(one.map((value, index) => value * (other[index] ?? 0)));
  return product / Math.sqrt(mean(one.map((value) => value ** 2)) * mean(other.map((value) => value ** 2)));
}

describe('a Latin hypercube', () => {
  it('draws each stratum once (McKay, Beckman & Conover 1979)', () => {
    const values = drawn('ballast of K1', { kind: 'rectangular', halfWidth: 2 }).sort();
    for (const [index, value] of values.entries()) {
      expect(value).toBeCloseTo(-2 + (4 * (index + 0.5)) / draws, 12);
    }
  });

  it('has each distribution’s spread: rectangular a/√3, normal its own, t wider by √(ν/(ν − 2))', () => {
    const deviation = (spread: Spread): number =>
      Math.sqrt(mean(drawn('x', spread).map((value) => value ** 2)));
    expect(deviation({ kind: 'rectangular', halfWidth: 3 })).toBeCloseTo(Math.sqrt(3), 4);
    expect(deviation({ kind: 'normal', deviation: 0.5 })).toBeCloseTo(0.5, 2);
    expect(deviation({ kind: 't', scale: 1, degreesOfFreedom: 10 })).toBeCloseTo(Math.sqrt(10 / 8), 1);
  });

  it('gives the same draws for the same name, whatever was drawn before, and others for another', () => {
    const before = latinHypercube(draws, randomFrom(1));
    before.add(new Float64Array(draws), 'something else', normal);
    const again = new Float64Array(draws);
    before.add(again, 'gain', normal);
    expect(again).toEqual(drawn('gain', normal));
    expect(again).not.toEqual(drawn('offset', normal));
    expect(again).not.toEqual(drawn('gain', normal, 2));
  });

  it('moves all that an error is added to the same way, and nothing else', () => {
    expect(correlation(drawn('gain', normal), drawn('gain', { kind: 'normal', deviation: 7 }))).toBeCloseTo(
      1,
      9,
    );
    // Standard deviation of a correlation by chance: 1/√1000 = 0.03.
    expect(Math.abs(correlation(drawn('gain', normal), drawn('offset', normal)))).toBeLessThan(0.12);
  });

  it('adds to what stands there, and nothing where the error is none', () => {
    const column = new Float64Array(draws).fill(5);
    const hypercube = latinHypercube(draws, randomFrom(1));
    hypercube.add(column, 'none', { kind: 'normal', deviation: 0 });
    expect(column).toEqual(new Float64Array(draws).fill(5));
    hypercube.add(column, 'some', normal);
    expect(mean(column)).toBeCloseTo(5, 9);
  });

  it('refuses no draws, and a spread that is none', () => {
    expect(() => latinHypercube(0, randomFrom(1))).toThrow(UnfitDataError);
    expect(() => drawn('x', { kind: 'normal', deviation: -1 })).toThrow(UnfitDataError);
    expect(() => drawn('x', { kind: 'rectangular', halfWidth: Number.NaN })).toThrow(UnfitDataError);
  });
});
