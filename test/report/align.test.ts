import { describe, expect, it } from 'vitest';
import fc from '../property.js';
import { alignTable, fittedTable } from '../../src/report/align.js';

describe('a table on a terminal', () => {
  const rows = [
    ['usable-current', '5.080', 'A', 'above that its output swings and no longer is of use'],
    ['recovery-time', '470', 'ms', ''],
  ];
  const sides = ['left', 'right', 'left', 'left'] as const;

  it('is one line a row in a pipe, and wherever that fits', () => {
    const plain = alignTable(rows, sides).map((line) => `  ${line}`);
    for (const columns of [undefined, 0, 100]) expect(fittedTable(rows, sides, columns)).toEqual(plain);
  });

  it('goes on with its last column below itself', () => {
    expect(fittedTable(rows, sides, 60)).toEqual([
      '  usable-current  5.080  A   above that its output swings',
      '                             and no longer is of use',
      '  recovery-time     470  ms',
    ]);
  });

  it('sets that column on lines of its own where too little is left', () => {
    expect(fittedTable(rows, sides, 40)).toEqual([
      '  usable-current  5.080  A',
      '    above that its output swings and no',
      '    longer is of use',
      '  recovery-time     470  ms',
    ]);
  });

  it('sets the others one blank apart where they are too wide themselves', () => {
    expect(fittedTable(rows, sides, 25)[0]).toBe('  usable-current 5.080 A');
  });

  it('has no line wider than the terminal unless a word is', () => {
    const cell = fc.stringMatching(/^[a-z]{1,7}( [a-z]{1,7}){0,9}$/);
    fc.assert(
      fc.property(
        fc.array(fc.array(cell, { minLength: 3, maxLength: 3 })),
        fc.integer({ min: 14, max: 90 }),
        (table, columns) => {
          for (const line of fittedTable(table, ['left', 'left', 'left'], columns)) {
            expect(line.length).toBeLessThanOrEqual(columns);
          }
        },
      ),
    );
  });
});

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
