import { expect, it } from 'vitest';
import { shown } from '../../src/quantity/shown-text.js';
import fc from '../property.js';

it.each<[string, string]>([
  ['4 Amp', "'4 Amp'"],
  ['mΩ µ °', "'mΩ µ °'"],
  ['a\nb', "'a\\u000ab'"],
  ['\u001b[31m', "'\\u001b[31m'"],
  ['\u202eabc', "'\\u202eabc'"],
  ['\ud800', "'\\ud800'"],
  ['x'.repeat(70), `'${'x'.repeat(60)}…'`],
])('%j is quoted so that it stays harmless', (text, quoted) => {
  expect(shown(text)).toBe(quoted);
});

it('no text breaks a line or steers a terminal', () => {
  fc.assert(
    fc.property(fc.string({ unit: 'binary' }), (text) => {
      expect(shown(text)).toMatch(/^[^\p{Cc}\p{Cs}\u2028\u2029]*$/u);
    }),
  );
});
