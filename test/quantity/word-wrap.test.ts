import { describe, expect, it } from 'vitest';
import { fitted, wordWrap } from '../../src/quantity/word-wrap.js';
import fc from '../property.js';

describe('text for a terminal', () => {
  it('breaks between words, and keeps the lines it had', () => {
    expect(wordWrap('Keep them clear of anything that burns.\nThen wait.', 20)).toBe(
      'Keep them clear of\nanything that burns.\nThen wait.',
    );
  });

  it('leaves a word that is too long in one piece', () => {
    expect(wordWrap('see https://example.org/a/long/path now', 10)).toBe(
      'see\nhttps://example.org/a/long/path\nnow',
    );
  });

  it('is indented within the width of the terminal', () => {
    expect(fitted('the load was found again', 16, { indent: '  ' })).toBe('  the load was\n  found again');
  });

  it('goes on as far in as it began, and further where it is to hang', () => {
    expect(wordWrap('  the load was found again', 16)).toBe('  the load was\n  found again');
    expect(wordWrap('step 2: the load was found', 16, '  ')).toBe('step 2: the load\n  was found');
    expect(fitted('  1. wire the load', 12, { hang: '   ' })).toBe('  1. wire\n     the\n     load');
  });

  it.each([undefined, 0])('keeps its lines where there are %s columns', (columns) => {
    expect(fitted('one long line\nand another', columns, { indent: '  ' })).toBe(
      '  one long line\n  and another',
    );
  });

  it('loses and adds nothing but line ends', () => {
    fc.assert(
      fc.property(fc.lorem({ maxCount: 40 }), fc.integer({ min: 5, max: 80 }), (text, width) => {
        expect(wordWrap(text, width).replaceAll('\n', ' ')).toBe(text);
      }),
    );
  });
});
