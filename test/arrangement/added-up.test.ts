import { describe, expect, it } from 'vitest';
import { addedUp } from '../../src/arrangement/added-up.js';
import type { Taken } from '../../src/arrangement/module-profile.js';
import { madeSource, madeTaken } from './made-profile.js';

const from = madeSource('K1', 'real-limit');
const shares = (taken: Taken, shared: string): Taken => ({
  ...taken,
  budget: taken.budget.map((line) => ({ ...line, shared })),
});

describe('measured numbers added up', () => {
  it('an error that both have falls out of their difference', () => {
    const one = shares(madeTaken(15.2, 0.01, from), 'meter');
    const other = shares(madeTaken(15.1, 0.01, from), 'meter');
    const apart = addedUp([
      { taken: one, times: 1 },
      { taken: other, times: -1 },
    ]);
    expect(apart.value).toBeCloseTo(0.1, 12);
    expect(apart.high - apart.low).toBeLessThan(1e-12);
  });

  it('errors of their own add in squares, whatever the sign', () => {
    const { value, low } = addedUp([
      { taken: madeTaken(3, 0.003, from), times: 1 },
      { taken: madeTaken(2, 0.004, from), times: -1 },
    ]);
    expect(value).toBe(1);
    expect(value - low).toBeCloseTo(1.959964 * 0.005, 8);
  });

  it('a number without a budget counts by its interval', () => {
    const taken: Taken = { ...madeTaken(15, 1, from), interval: [14.9, 15.1], budget: [] };
    const { low, high } = addedUp([{ taken, times: 1 }]);
    expect([low, high]).toEqual([expect.closeTo(14.9, 9), expect.closeTo(15.1, 9)]);
  });

  it('nothing added up is nothing, for certain', () => {
    expect(addedUp([])).toEqual({ value: 0, low: 0, high: 0 });
  });
});
