import { describe, expect, it } from 'vitest';

import { requireFinite, requireSameLength, UnfitDataError } from '../../src/statistics/unfit-data-error.js';

describe('data that nothing can be worked out from', () => {
  it('are refused in one line that says which value it is', () => {
    expect(() => {
      requireFinite('mean', [1, -Infinity]);
    }).toThrow('mean cannot be worked out: value 2 of 2 is -Infinity');
    expect(() => {
      requireFinite('mean', []);
    }).toThrow('mean cannot be worked out: there are no values');
    expect(() => {
      requireSameLength('fitLine', [1], []);
    }).toThrow('fitLine cannot be worked out: there are 1 values of x and 0 of y');
  });

  it('come with advice, and pass when sound', () => {
    expect(new UnfitDataError('mean', 'it is empty').advice).toMatch(/report it/);
    expect(() => {
      requireFinite('mean', Float64Array.of(0, -1e300));
    }).not.toThrow();
  });
});
