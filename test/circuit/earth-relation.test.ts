import { describe, expect, it } from 'vitest';
import { earthRelation } from '../../src/circuit/earth-relation.js';
import fc from '../property.js';

const limits = { bondedBelow: 10, isolatedAbove: 1e6 };

describe('how an output stands to earth', () => {
  it.each([
    [[-0.06, 0.08], 'bonded'],
    [[0.9, 10], 'bonded'],
    [[9.9, 10.1], 'undetermined'],
    [[10.1, 12], 'leaky'],
    [[46e3, 48e3], 'leaky'],
    [[0.99e6, 1.01e6], 'undetermined'],
    [[1e6, 1.2e6], 'isolated'],
    [[10e6, Infinity], 'isolated'],
    [[0.2, Infinity], 'undetermined'],
    [[0.2, 3e6], 'undetermined'],
    [[-900, -800], 'undetermined'],
    [[-900, 4], 'undetermined'],
    [[Number.NaN, Number.NaN], 'undetermined'],
  ] as const)('is told by the whole interval %j: %s', (interval, relation) => {
    expect(earthRelation(interval, limits)).toBe(relation);
  });

  it('is never something else for a part of the interval than for all of it', () => {
    const ends = fc.tuple(
      fc.double({ min: -100, max: 1e8, noNaN: true }),
      fc.double({ min: 0, max: 1e8, noNaN: true }),
    );
    fc.assert(
      fc.property(ends, fc.double({ min: 0, max: 1, noNaN: true }), ([low, width], share) => {
        const all = earthRelation([low, low + width], limits);
        const part = earthRelation([low + (width * share) / 2, low + width * (1 - share / 2)], limits);
        expect(all === 'undetermined' || part === all).toBe(true);
      }),
    );
  });
});
