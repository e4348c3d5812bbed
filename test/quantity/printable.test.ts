import { describe, expect, it } from 'vitest';
import { printable, printableLines } from '../../src/quantity/printable.js';
import fc from '../property.js';

describe('a printable text', () => {
  it('of whatever there is holds nothing that steers a terminal, and keeps what people write', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'binary', maxLength: 200 }), (text) => {
        expect(printable(text)).not.toMatch(/[\p{Cc}\p{Cf}\p{Cs}\u2028\u2029]/u);
      }),
    );
    expect(printable('Größe 4 Ω ± 1 µA · ليمون')).toBe('Größe 4 Ω ± 1 µA · ليمون');
  });

  it('of several lines keeps them apart', () => {
    expect(printableLines('one\u001b[2J\ntwo\r')).toBe('one\\u001b[2J\ntwo\\u000d');
  });
});
