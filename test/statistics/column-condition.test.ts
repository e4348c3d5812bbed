import { describe, expect, it } from 'vitest';

import { columnCondition } from '../../src/statistics/column-condition.js';
import { relativeError } from './relative-error.js';

describe('the condition of columns', () => {
  it('is 1 at right angles, whatever their lengths', () => {
    expect(columnCondition([Float64Array.of(3, 0), Float64Array.of(0, 1e-6)]).condition).toBe(1);
  });

  it('is the cotangent of half the angle between two columns', () => {
    for (const angle of [1.5, 1, 0.1, 1e-3, 1e-7]) {
      const { condition, weakest } = columnCondition([
        Float64Array.of(5, 0),
        Float64Array.of(Math.cos(angle), Math.sin(angle)),
      ]);
      expect(relativeError(condition, 1 / Math.tan(angle / 2))).toBeLessThan(1e-8);
      expect(weakest).toEqual([0, 1]);
    }
  });

  it('names the columns of which one is made of the others, and no others', () => {
    const { condition, weakest } = columnCondition([
      Float64Array.of(1, 0, 0, 0),
      Float64Array.of(0, 1, 0, 0),
      Float64Array.of(0, 0, 1, 0),
      Float64Array.of(1, 0, -1, 0),
    ]);
    expect(condition).toBeGreaterThan(1e15);
    expect(weakest).toEqual([0, 2, 3]);
  });

  it('is Infinity for an empty column, which it names', () => {
    expect(columnCondition([Float64Array.of(1, 2), Float64Array.of(0, 0)])).toEqual({
      condition: Infinity,
      weakest: [1],
    });
  });
});
