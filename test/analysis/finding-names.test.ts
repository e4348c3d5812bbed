import { describe, expect, it } from 'vitest';
import { dimensionOfFinding } from '../../src/analysis/finding-names.js';

describe('what a finding measures', () => {
  it.each([
    ['dropout-current', 'current'],
    ['limit-style', 'word'],
    ['share-of-K2', 'ratio'],
    ['float-voltage-of-K3', 'voltage'],
    ['case-temperature', undefined],
    ['constructor', undefined],
  ])('%s: %s', (name, dimension) => {
    expect(dimensionOfFinding(name)).toBe(dimension);
  });
});
