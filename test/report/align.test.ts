import { describe, expect, it } from 'vitest';
import { alignTable } from '../../src/report/align.js';

describe('an aligned table', () => {
  it('sets numbers flush right and words flush left, two blanks apart', () => {
    const rows = [
      ['a', '1.25', 'V'],
      ['bcd', '10', 'mΩ'],
    ];
    expect(alignTable(rows, ['left', 'right', 'left'])).toEqual(['a    1.25  V', 'bcd    10  mΩ']);
  });

  it('leaves out columns in which nothing stands, and blanks at the ends of lines', () => {
    expect(
      alignTable(
        [
          ['a', '', 'x'],
          ['b', '', ''],
        ],
        ['left', 'right', 'left'],
      ),
    ).toEqual(['a  x', 'b']);
  });

  it('counts what is seen: signs beyond ASCII as one, colour as none', () => {
    const rows = [
      ['\u001b[1m±µΩ\u001b[22m', '|'],
      ['abcd', '|'],
    ];
    const [first = '', second] = alignTable(rows, ['left', 'left']);
    // eslint-disable-next-line no-control-regex
    expect(first.replace(/\u001b\[\d+m/g, '')).toBe('±µΩ   |');
    expect(second).toBe('abcd  |');
  });

  it('of no rows has no lines', () => {
    expect(alignTable([], ['left'])).toEqual([]);
  });
});
