import { describe, expect, it } from 'vitest';

import { fUpperTail } from '../../src/statistics/f-distribution.js';
import { studentTDistribution } from '../../src/statistics/student-t.js';
import { relativeError } from './relative-error.js';

describe('the upper tail of the F distribution', () => {
  it('has a closed form for two degrees of freedom above', () => {
    for (const [f, dof] of [
      [0.1, 3],
      [4, 56],
      [30, 24],
      [3, 1e6],
    ] as const) {
      expect(relativeError(fUpperTail(f, 2, dof), (1 + (2 * f) / dof) ** (-dof / 2))).toBeLessThan(1e-9);
    }
  });

  it("is the two tails of Student's t for one degree of freedom above", () => {
    expect(relativeError(fUpperTail(6.25, 1, 12), 2 * studentTDistribution(-2.5, 12))).toBeLessThan(1e-12);
  });

  it('has defined ends, and refuses what is no variance ratio', () => {
    expect(fUpperTail(0, 2, 10)).toBe(1);
    expect(fUpperTail(Infinity, 2, 10)).toBe(0);
    expect(() => fUpperTail(-1, 2, 10)).toThrow(/the ratio is -1/);
    expect(() => fUpperTail(Number.NaN, 2, 10)).toThrow(/the ratio is NaN/);
    expect(() => fUpperTail(1, 2, 0)).toThrow(/at 2 and 0 degrees/);
  });
});
