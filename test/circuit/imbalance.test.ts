import { describe, expect, it } from 'vitest';
import { imbalanceOf } from '../../src/circuit/imbalance.js';

describe('the imbalance of a group', () => {
  it.each<[string, readonly number[], number]>([
    ['is the spread over the mean', [2.3125, 1.6875], 0.3125],
    ['counts only the extremes of three', [2.5, 2, 1.5], 0.5],
    ['is nothing for equal currents', [1.2, 1.2, 1.2], 0],
    ['is twice the mean when one of two carries all', [4, 0], 2],
    ['is nothing when nothing flows', [0, 0], 0],
    ['is nothing without modules', [], 0],
  ])('%s', (_, currents, expected) => {
    expect(imbalanceOf(currents)).toBeCloseTo(expected, 12);
  });
});
