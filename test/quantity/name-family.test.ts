import { describe, expect, it } from 'vitest';
import { ofNameOrFamily } from '../../src/quantity/name-family.js';

const filed = { imbalance: 1, 'share-of-*': 2 };

describe('what is filed under a name', () => {
  it.each([
    ['imbalance', 1],
    ['share-of-K1', 2],
    ['share-of-*', 2],
    ['share-of-', undefined],
    ['share', undefined],
    ['toString', undefined],
  ])('%s', (name, found) => {
    expect(ofNameOrFamily(name, filed)).toBe(found);
  });
});
