import { describe, expect, it } from 'vitest';
import { RunningSum } from '../../src/circuit/running-sum.js';

describe('a running sum', () => {
  it('keeps what is small while something huge comes and goes', () => {
    const sum = new RunningSum();
    for (const term of [5.28, 1e16, 0.1, -1e16]) sum.add(term);
    expect(sum.value).toBe(5.38);
    sum.add(-5.28);
    expect(sum.value).toBeCloseTo(0.1, 15);
  });
});
