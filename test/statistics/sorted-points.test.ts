import { describe, expect, it } from 'vitest';

import { type Random, randomFrom } from '../../src/statistics/random.js';
import { sortedPoints } from '../../src/statistics/sorted-points.js';
import fc from '../property.js';

describe('points in order', () => {
  it('are taken as they are when they ascend, and turned when they descend', () => {
    const x = Float64Array.of(1, 2, 2, 5);
    const y = Float64Array.of(4, 3, 2, 1);
    const sorted = sortedPoints(x, y);
    expect(sorted.x).toBe(x);
    expect(sorted.y).toBe(y);
    expect([...sortedPoints([3, 2, 1], [30, 20, 10]).y]).toEqual([10, 20, 30]);
  });

  it('keep each y with its x, and leave the data given alone', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: -20, max: 20 })), (places) => {
        const given = Object.freeze([...places]);
        const { x, y } = sortedPoints(
          given,
          given.map((place) => 2 * place),
        );
        expect([...x]).toEqual([...places].sort((one, other) => one - other));
        expect([...y]).toEqual([...x].map((place) => 2 * place));
      }),
    );
  });

  it.each([
    ['spread evenly', (random: Random) => random.uniform(-3, 8)],
    ['at few places', (random: Random) => Math.floor(random.uniform(0, 20))],
    ['close together, but for a few that lie far off', (random: Random) => random.uniform(0, 1) ** 400],
    [
      'closer together than their distance from 0 can tell',
      (random: Random) => 1e9 + random.uniform(0, 1e-6),
    ],
    ['further apart than a number can say', (random: Random) => random.uniform(-1, 1) * Number.MAX_VALUE],
    ['without end', (random: Random) => 1 / Math.floor(random.uniform(-3, 3))],
    ['the least numbers that there are', (random: Random) => Math.floor(random.uniform(0, 9)) * 5e-324],
  ])('are where comparing them one by one puts them when they are %s', (_, drawn) => {
    for (const count of [2, 3, 7, 40, 1_000, 5_000]) {
      const random = randomFrom(count);
      const points = Array.from({ length: count }, (_, index) => ({ place: drawn(random), index }));
      const { x, y } = sortedPoints(
        points.map(({ place }) => place),
        points.map(({ index }) => index),
      );
      points.sort((one, other) => (one.place < other.place ? -1 : one.place > other.place ? 1 : 0));
      expect(x).toEqual(Float64Array.from(points, ({ place }) => place));
      expect(y).toEqual(Float64Array.from(points, ({ index }) => index));
    }
  });
});
