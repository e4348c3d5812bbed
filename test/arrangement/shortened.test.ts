import { describe, expect, it } from 'vitest';
import { shortened } from '../../src/arrangement/shortened.js';
import fc from '../property.js';

describe('a shortened text', () => {
  it('is the text itself where that is short', () => {
    expect(shortened('15 V brick of the mist pump')).toBe('15 V brick of the mist pump');
  });

  it('begins as the text does, ends with no half of a sign, and says that it was cut', () => {
    // Encoding throws at half a sign.
    fc.assert(
      fc.property(fc.string({ unit: 'grapheme-composite', minLength: 201, maxLength: 400 }), (text) => {
        const [begin = '', rest] = shortened(text).split('… (shortened');
        expect(rest).toBe('; the record has all of it)');
        expect(text.startsWith(begin)).toBe(true);
        expect(encodeURIComponent(begin)).not.toBe('');
      }),
    );
    expect(shortened('🌱'.repeat(120) + 'x')).toMatch(/^(🌱)+…/u);
    expect(shortened(`x${'🌱'.repeat(120)}`)).toMatch(/^x(🌱)+…/u);
  });
});
