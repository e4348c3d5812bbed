import { describe, expect, it } from 'vitest';

import { TooFewPointsError } from '../../src/statistics/too-few-points-error.js';

describe('too few points', () => {
  it('say how many there are and how many it takes, or that they are all at one place', () => {
    const few = new TooFewPointsError({ points: 2, needed: 3, allAtOnePlace: false });
    expect(few.message).toBe('a line with an uncertainty needs at least 3 points, and there are 2');
    expect(few.advice).toMatch(/more set-points/);
    expect(new TooFewPointsError({ points: 9, needed: 3, allAtOnePlace: true }).message).toMatch(
      /all 9 points are at the same place/,
    );
  });
});
