import { describe, expect, it } from 'vitest';
import { randomFrom } from '../../src/statistics/random.js';

const many = (draw: () => number): number[] => Array.from({ length: 20_000 }, draw);
const mean = (values: readonly number[]): number =>
  values.reduce((sum, value) => sum + value, 0) / values.length;

describe('chance by seed', () => {
  it('repeats itself for the same seed and differs for another', () => {
    const stream = (seed: number): number[] => {
      const random = randomFrom(seed);
      return [random.uniform(0, 1), random.normal(), random.uniform(0, 1)];
    };
    expect(stream(7)).toEqual(stream(7));
    expect(stream(7)).not.toEqual(stream(8));
  });

  it('forks streams that neither disturb their parent nor follow each other', () => {
    const alone = randomFrom(7);
    const parent = randomFrom(7);
    const meter = parent.fork('meter');
    meter.normal();
    expect(parent.uniform(0, 1)).toBe(alone.uniform(0, 1));
    expect(randomFrom(7).fork('meter').uniform(0, 1)).not.toBe(randomFrom(7).fork('load').uniform(0, 1));
    expect(randomFrom(7).fork('meter').uniform(0, 1)).toBe(randomFrom(7).fork('meter').uniform(0, 1));
    expect(randomFrom(8).fork('meter').uniform(0, 1)).not.toBe(randomFrom(7).fork('meter').uniform(0, 1));
  });

  it('is even within its bounds', () => {
    const random = randomFrom(3);
    const values = many(() => random.uniform(-2, 4));
    expect(Math.min(...values)).toBeGreaterThanOrEqual(-2);
    expect(Math.max(...values)).toBeLessThan(4);
    // Standard error of the mean: 6/√12/√20000 = 0.012.
    expect(mean(values)).toBeCloseTo(1, 1);
    expect(values.filter((value) => value < -0.5).length / values.length).toBeCloseTo(0.25, 1);
  });

  it('is normal with mean 0 and standard deviation 1', () => {
    const random = randomFrom(3);
    const values = many(() => random.normal());
    expect(mean(values)).toBeCloseTo(0, 1);
    expect(Math.sqrt(mean(values.map((value) => value ** 2)))).toBeCloseTo(1, 1);
    // 95.0 % lie within 1.96 standard deviations (any table of the normal distribution).
    expect(values.filter((value) => Math.abs(value) < 1.96).length / values.length).toBeCloseTo(0.95, 2);
  });
});
