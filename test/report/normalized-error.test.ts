import { describe, expect, it } from 'vitest';
import { normalizedErrorInWords } from '../../src/report/normalized-error.js';

describe('E_n as it is shown', () => {
  it.each([
    [0.456, '0.46'],
    [-1.694, '-1.69'],
    [-0.0001, '0.00'],
    [1, '1.00'],
    [1.0034, '1.003'],
    [0.9966, '0.997'],
    [-1.00004, '-1.00004'],
    [0.99996, '0.99996'],
  ])('%d is %s: near 1 on the side of it where it lies', (value, text) => {
    expect(normalizedErrorInWords(value)).toBe(text);
  });
});
