import { describe, expect, it } from 'vitest';
import { plotted } from '../../../src/report/terminal-chart/plot.js';
import { shareBars } from '../../../src/report/terminal-chart/share-bars.js';
import fc from '../../property.js';

const line = Array.from({ length: 9 }, (_, at) => ({ x: at / 2, y: 15.2 - 0.018 * at }));
const size = { width: 44, height: 10, unicode: false };

describe('a chart in signs', () => {
  it('has axes with numbers, points, and letters with what they stand for', () => {
    const plot = {
      title: 'Voltage in V over current in A',
      points: [...line, { x: 4.5, y: 15.05, sign: 'x' }],
      marks: [
        { letter: 'N', x: 4, says: 'nameplate, 4 A' },
        { letter: 'R', x: 4, says: 'recommended, 4 A' },
      ],
      key: ['x not held'],
    };
    const [title, ...rest] = plotted(plot, size);
    expect(title).toBe('Voltage in V over current in A');
    const field = rest.slice(0, 8);
    expect(field.filter((row) => row.includes('*')).length).toBeGreaterThan(3);
    expect(field.at(-1)).toMatch(/x$/);
    expect(rest[8]).toMatch(/^ +\+[-+]+$/);
    expect(rest[9]).toMatch(/^ +0 +2 +4$/);
    expect(rest[10]?.trim()).toBe('N');
    expect(rest[11]?.trim()).toBe('R');
    expect(rest[10]?.indexOf('N')).toBe(rest[11]?.indexOf('R'));
    // Where the letter stands there is a line above it.
    expect(field[1]?.[rest[10]?.indexOf('N') ?? 0]).toBe(':');
    expect(rest.slice(12).join(' ')).toBe('N nameplate, 4 A; R recommended, 4 A; x not held');
  });

  it('sets eight points in a sign where there is Unicode', () => {
    const text = plotted({ title: 'V', points: line, marks: [], key: [] }, { ...size, unicode: true }).join(
      '',
    );
    expect(text.match(/[\u2801-\u28ff]/gu)?.length).toBe(9);
    expect(text).not.toContain('*');
  });

  it('shows equal points in the middle', () => {
    const points = [1, 1, 1].map((x) => ({ x, y: 5 }));
    const rows = plotted({ title: 'V', points, marks: [], key: [] }, size);
    expect(rows.filter((row) => row.includes('*'))).toHaveLength(1);
    expect(rows.slice(4, 7).join('')).toContain('*');
  });

  it.each([
    ['no points', [], size],
    ['none that is a number', [{ x: Number.NaN, y: 1 }], size],
    [
      'numbers too far apart',
      [
        { x: 0, y: -1.7e308 },
        { x: 1, y: 1.7e308 },
      ],
      size,
    ],
    ['a narrow window', line, { ...size, width: 29 }],
    ['a low one', line, { ...size, height: 4 }],
  ])('has no lines where there are %s', (_, points, each) => {
    expect(plotted({ title: 'V', points, marks: [], key: [] }, each)).toEqual([]);
  });

  it('is never wider than asked, nor higher, and writes numbers only', () => {
    const number = fc.oneof(
      fc.double(),
      fc.double({ min: 0, max: 20, noNaN: true }),
      fc.constantFrom(0, 1, -0, 1e16, 1e-16, Infinity),
    );
    const point = fc.record(
      { x: number, y: number, sign: fc.constantFrom('x') },
      { requiredKeys: ['x', 'y'] },
    );
    fc.assert(
      fc.property(
        fc.array(point, { maxLength: 60 }),
        fc.array(
          fc.record({ letter: fc.constantFrom('N', 'D', 'R'), x: number, says: fc.constant('what it is') }),
          {
            maxLength: 4,
          },
        ),
        fc.integer({ min: 1, max: 90 }),
        fc.integer({ min: 1, max: 30 }),
        fc.boolean(),
        (points, marks, width, height, unicode) => {
          const lines = plotted({ title: 'volts', points, marks, key: [] }, { width, height, unicode });
          for (const each of lines) expect(Array.from(each).length).toBeLessThanOrEqual(width);
          const field = lines.filter((each) => /[|+│┤]/u.test(each));
          expect(field.length).toBeLessThanOrEqual(height);
          expect(lines.join('\n')).not.toMatch(/NaN|Infinity|undefined/);
          if (!unicode) expect(lines.join('\n')).toMatch(/^[\n -~]*$/);
        },
      ),
    );
  });
});

describe('bars of shares', () => {
  const bars = [
    { name: 'K1', share: 0.6, says: '60.0 %' },
    { name: 'K2', share: 0.4, says: '40.0 %' },
  ];

  it('are as long as their shares of the longest', () => {
    expect(shareBars('Shares', bars, { width: 30, unicode: false })).toEqual([
      'Shares',
      'K1  ##################  60.0 %',
      'K2  ############        40.0 %',
    ]);
  });

  it('are not there without room, without modules or without any share', () => {
    expect(shareBars('Shares', bars, { width: 19, unicode: true })).toEqual([]);
    expect(shareBars('Shares', [], { width: 80, unicode: true })).toEqual([]);
    const nothing = [{ name: 'K1', share: 0, says: '0 %' }];
    expect(shareBars('Shares', nothing, { width: 80, unicode: true })).toEqual([]);
  });

  it('are never wider than asked', () => {
    fc.assert(
      fc.property(
        fc.array(fc.record({ name: fc.string(), share: fc.double(), says: fc.string() })),
        fc.integer({ min: 1, max: 100 }),
        (any, width) => {
          for (const each of shareBars('of all', any, { width, unicode: true })) {
            expect(each.length).toBeLessThanOrEqual(width);
          }
        },
      ),
    );
  });
});
