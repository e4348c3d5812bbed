import { describe, expect, it } from 'vitest';
import { printable, printableData } from '../../src/report/printable.js';

describe('a printable text', () => {
  it.each([
    ['15 V brick, 4 Ω ± 1 µA · ok', '15 V brick, 4 Ω ± 1 µA · ok'],
    ['a\u001b[31mb', 'a\\u001b[31mb'],
    ['a\nb\tc', 'a\\u000ab\\u0009c'],
    ['\u009b0m\u202e\u200b', '\\u009b0m\\u202e\\u200b'],
    ['\ud800', '\\ud800'],
    ['\u{e0001}', '\\ue0001'],
  ])('of %j is %j', (text, expected) => {
    expect(printable(text)).toBe(expected);
  });

  it('is made of every text in plain data, and nothing else is touched', () => {
    const moments = new Map([['a', '\u001b']]);
    const data = { list: ['\u0007', 1, null], inner: { text: '\u001b' }, moments };
    expect(printableData(data)).toEqual({ list: ['\\u0007', 1, null], inner: { text: '\\u001b' }, moments });
  });
});
