import { describe, expect, it } from 'vitest';
import {
  formatInterval,
  formatQuantity,
  formatShare,
  formatUncertain,
} from '../../src/quantity/format-quantity.js';
import { parseQuantity, parseQuantityOrShare } from '../../src/quantity/parse-quantity.js';
import { dimensions, references, type Dimension, type ReferenceName } from '../../src/quantity/quantity.js';
import fc from '../property.js';

const everyDimension = Object.keys(dimensions) as Dimension[];

describe('a quantity is written with the prefix that suits its size', () => {
  it.each<[number, Dimension, string]>([
    [15.21, 'voltage', '15.21 V'],
    [0.2, 'voltage', '200 mV'],
    [-0.00025, 'voltage', '-250 µV'],
    [1e-9, 'voltage', '0.001 µV'],
    [1200, 'voltage', '1.2 kV'],
    [0, 'voltage', '0 V'],
    [-0, 'voltage', '0 V'],
    [4, 'current', '4 A'],
    [40_000, 'current', '40000 A'],
    [0.035, 'resistance', '35 mΩ'],
    [2.2e6, 'resistance', '2.2 MΩ'],
    [120, 'power', '120 W'],
    [0.02, 'time', '20 ms'],
    [5, 'time', '5 s'],
    [90, 'time', '90 s'],
    [119.5, 'time', '119.5 s'],
    [720, 'time', '12 min'],
    [150, 'time', '2.5 min'],
    // Not a round number of minutes, so it stays in seconds.
    [200, 'time', '200 s'],
    [7200, 'time', '2 h'],
    [5400, 'time', '90 min'],
    [23, 'temperature', '23 °C'],
    [0.5, 'temperature', '0.5 °C'],
    [35, 'temperature-difference', '35 K'],
    [-0.002, 'ratio', '-0.2 %'],
    [0.07, 'ratio', '7 %'],
    [1.4, 'ratio', '140 %'],
    [-0.003, 'voltage-rate', '-3 mV/h'],
    [Number.NaN, 'voltage', 'not a number V'],
    [Number.POSITIVE_INFINITY, 'resistance', '∞ Ω'],
  ])('%d of %s', (value, dimension, text) => {
    expect(formatQuantity(value, dimension)).toBe(text);
  });

  it.each<[number, Dimension, number, string]>([
    [15.2, 'voltage', 4, '15.20 V'],
    [0.0182345, 'resistance', 3, '18.2 mΩ'],
    // Rounding carries it into the next prefix.
    [0.99996, 'voltage', 4, '1.000 V'],
    [1234.5, 'voltage', 2, '1.2 kV'],
    [1234, 'temperature', 2, '1200 °C'],
    [0, 'voltage', 4, '0 V'],
    [700, 'time', 3, '11.7 min'],
    [9000, 'time', 3, '2.50 h'],
  ])('%d of %s to %d digits', (value, dimension, significant, text) => {
    expect(formatQuantity(value, dimension, { significant })).toBe(text);
  });

  it('reading what was written gives the very same number', () => {
    const numbers = fc
      .double({ noNaN: true, noDefaultInfinity: true })
      .filter((value) => Math.abs(value) < 1e300);
    fc.assert(
      fc.property(numbers, fc.constantFrom(...everyDimension), (value, dimension) => {
        fc.pre(value === 0 || Math.abs(value) > 1e-290);
        expect(parseQuantity(formatQuantity(value, dimension), dimension)).toBe(value + 0 === 0 ? 0 : value);
      }),
      { numRuns: 2000 },
    );
  });

  it('reading what was written gives the same number for round times too', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 200_000 }), (tenths) => {
        expect(parseQuantity(formatQuantity(tenths / 10, 'time'), 'time')).toBe(tenths / 10);
      }),
    );
  });

  it('reading a share that was written gives the same share', () => {
    const names = Object.keys(references) as ReferenceName[];
    fc.assert(
      fc.property(fc.double({ min: 1e-6, max: 100, noNaN: true }), fc.constantFrom(...names), (ratio, of) => {
        const share = { kind: 'share', ratio, of } as const;
        expect(parseQuantityOrShare(formatShare(share, references[of]), references[of])).toEqual(share);
      }),
    );
  });

  it('a share is written as a file would write it', () => {
    expect(formatShare({ kind: 'share', ratio: 1.4, of: 'rated-current' }, 'current')).toBe(
      '140 % of rated-current',
    );
    expect(formatShare({ kind: 'absolute', value: 4 }, 'current')).toBe('4 A');
  });
});

// JCGM 100:2008, 7.2.6: at most two significant digits of uncertainty, and the estimate rounded to match.
// The first row is its own example, from memory of the text: 10.057 62 Ω with 27 mΩ is given as 10.058 Ω.
describe('a result is rounded by its uncertainty', () => {
  it.each<[number, number | undefined, Dimension, string, string, string]>([
    [10.05762, 0.027, 'resistance', '10.058', '0.027', 'Ω'],
    [15.21, 0.0012, 'voltage', '15.2100', '0.0012', 'V'],
    [0.0182, 0.0008, 'resistance', '18.20', '0.80', 'mΩ'],
    [0.0182, 0.00081, 'resistance', '18.20', '0.81', 'mΩ'],
    [-0.002, 0.0004, 'ratio', '-0.200', '0.040', '%'],
    // Two digits may become three places when the rounding carries: 0.0996 is 0.10.
    [5.3, 0.0996, 'current', '5.30', '0.10', 'A'],
    [0, 0.0012, 'voltage', '0.0', '1.2', 'mV'],
    [-0.00001, 0.0012, 'voltage', '0.0', '1.2', 'mV'],
    [0.0001, 0.0012, 'voltage', '0.1', '1.2', 'mV'],
    [15.2, 123.4, 'voltage', '20', '120', 'V'],
    [-15.2, 1.6, 'voltage', '-15.2', '1.6', 'V'],
    [720, 31, 'time', '12.00', '0.52', 'min'],
    [4200, 250, 'resistance', '4.20', '0.25', 'kΩ'],
    [15.21, undefined, 'voltage', '15.21', '', 'V'],
    [15.2104, undefined, 'voltage', '15.21', '', 'V'],
    [0, undefined, 'voltage', '0', '', 'V'],
    [15.21, 0, 'voltage', '15.21', '0', 'V'],
    [15.21, Number.POSITIVE_INFINITY, 'voltage', '15.21', '∞', 'V'],
  ])('%d ± %d as %s', (value, expanded, dimension, text, uncertainty, unit) => {
    expect(formatUncertain(value, expanded, dimension)).toEqual({ value: text, uncertainty, unit });
  });

  it('both numbers have as many decimals, and are right to half of the last', () => {
    const positive = fc.double({ min: 1e-6, max: 1e3, noNaN: true });
    fc.assert(
      fc.property(fc.double({ min: -1e3, max: 1e3, noNaN: true }), positive, (value, expanded) => {
        const written = formatUncertain(value, expanded, 'current');
        expect(decimals(written.value)).toBe(decimals(written.uncertainty));
        const back = parseQuantity(`${written.value} ${written.unit}`, 'current');
        expect(Math.abs(back - value)).toBeLessThanOrEqual(0.0501 * expanded * 1.06);
        const uncertainty = parseQuantity(`${written.uncertainty} ${written.unit}`, 'current');
        expect(Math.abs(uncertainty - expanded)).toBeLessThanOrEqual(0.0501 * expanded);
      }),
    );
  });
});

describe('a value within its interval', () => {
  it.each([
    [9.683, 9.52, 9.849, 'current', ['9.68', '9.52', '9.85', 'A']],
    [9.683, 9.68, 9.94, 'current', ['9.68', '9.68', '9.94', 'A']],
    [0.094, 0.02, 0.101, 'ratio', ['9.4', '2.0', '10.1', '%']],
    [0.051, 0.0485, 0.0536, 'resistance', ['51.0', '48.5', '53.6', 'mΩ']],
    [5.1, 5.0, Number.POSITIVE_INFINITY, 'current', ['5.10', '5.00', '', 'A']],
    [15.2, 15.2, 15.2, 'voltage', ['15.2', '', '', 'V']],
    [0.3, 0.1 + 0.2, 0.3, 'voltage', ['300', '', '', 'mV']],
    [Number.NaN, Number.NaN, Number.NaN, 'voltage', ['not a number', '', '', 'V']],
  ] as const)('%d between %d and %d', (value, low, high, dimension, [text, from, to, unit]) => {
    expect(formatInterval(value, low, high, dimension)).toEqual({ value: text, low: from, high: to, unit });
  });
});

function decimals(text: string): number {
  return text.split('.')[1]?.length ?? 0;
}
