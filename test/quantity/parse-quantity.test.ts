import { describe, expect, it } from 'vitest';
import {
  parseQuantity,
  parseQuantityOrAnyShare,
  parseQuantityOrShare,
  quantityOrSharePattern,
  quantityPattern,
  QuantityError,
  readQuantity,
  readQuantityOrAnyShare,
} from '../../src/quantity/parse-quantity.js';
import { dimensions, type Dimension } from '../../src/quantity/quantity.js';
import fc from '../property.js';

const everyDimension = Object.keys(dimensions) as Dimension[];

describe('a quantity is read into the unit of its dimension', () => {
  it.each<[string, Dimension, number]>([
    ['15 V', 'voltage', 15],
    ['15V', 'voltage', 15],
    ['-3 V', 'voltage', -3],
    ['+3 V', 'voltage', 3],
    ['.5 V', 'voltage', 0.5],
    ['1e-3 V', 'voltage', 0.001],
    ['1E3 mV', 'voltage', 1],
    ['0 V', 'voltage', 0],
    ['007 V', 'voltage', 7],
    ['1.2 kV', 'voltage', 1200],
    ['250 \u00b5V', 'voltage', 0.00025],
    ['250 \u03bcV', 'voltage', 0.00025],
    ['250 uV', 'voltage', 0.00025],
    ['400 mA', 'current', 0.4],
    ['35 m\u03a9', 'resistance', 0.035],
    ['35 m\u2126', 'resistance', 0.035],
    ['35 mohm', 'resistance', 0.035],
    ['35 mOhm', 'resistance', 0.035],
    // The trap of the field: mΩ and MΩ differ by nine decades, and only in the size of a letter.
    ['1 M\u03a9', 'resistance', 1e6],
    ['1 Mohm', 'resistance', 1e6],
    ['4.7 kΩ', 'resistance', 4700],
    ['2.2 ohm', 'resistance', 2.2],
    ['120 W', 'power', 120],
    ['20 ms', 'time', 0.02],
    ['5 us', 'time', 5e-6],
    ['1.5 min', 'time', 90],
    ['2 h', 'time', 7200],
    ['40 °C', 'temperature', 40],
    ['-10 degC', 'temperature', -10],
    ['35 K', 'temperature-difference', 35],
    ['5 %', 'ratio', 0.05],
    ['-0.2 %', 'ratio', -0.002],
    ['7%', 'ratio', 0.07],
    ['-3 mV/h', 'voltage-rate', -0.003],
  ])('%s', (text, dimension, value) => {
    expect(parseQuantity(text, dimension)).toBe(value);
  });
});

describe('what is no such quantity is refused in words that help', () => {
  it.each<[string, Dimension, string]>([
    ['4', 'current', 'found the bare number 4; a current needs its unit: 4 A, 400 mA'],
    ['1e3', 'time', 'found the bare number 1e3; a time needs its unit: 20 ms, 5 s, 1.5 min'],
    ['4 V', 'current', "found '4 V', which is a voltage; a current is needed: 4 A, 400 mA"],
    ['4 Amp', 'current', "found '4 Amp'; no unit is written 'Amp'; a current is given in µA, mA, A"],
    ['4 a', 'current', "found '4 a'; no unit is written 'a'; a current is given in µA, mA, A"],
    // Nobody has such a load; it is a slip of the shift key.
    ['4 MA', 'current', "found '4 MA'; no unit is written 'MA'; a current is given in µA, mA, A"],
    [
      '4 OHM',
      'resistance',
      "found '4 OHM'; no unit is written 'OHM'; a resistance is given in µΩ, mΩ, Ω (or ohm, Ohm), kΩ, MΩ",
    ],
    [
      '4 m',
      'resistance',
      "found '4 m'; no unit is written 'm'; a resistance is given in µΩ, mΩ, Ω (or ohm, Ohm), kΩ, MΩ",
    ],
    ['35 C', 'temperature', "found '35 C'; no unit is written 'C'; a temperature is given in °C (or degC)"],
    [
      '35 K',
      'temperature',
      "found '35 K', which is a difference of temperatures; a temperature is needed: 40 °C, 40 degC",
    ],
    ['2,5 A', 'current', "found '2,5 A'; the decimal sign is a point: '2.5 A'"],
    ['', 'current', "found ''; a current is needed: 4 A, 400 mA"],
    ['A', 'current', "found 'A'; a current is needed: 4 A, 400 mA"],
    ['NaN A', 'current', "found 'NaN A'; a current is needed: 4 A, 400 mA"],
    ['Infinity A', 'current', "found 'Infinity A'; a current is needed: 4 A, 400 mA"],
    ['0x10 A', 'current', "found '0x10 A'; no unit is written 'x10 A'; a current is given in µA, mA, A"],
    ['5. A', 'current', "found '5. A'; a current is needed: 4 A, 400 mA"],
    ['1_000 A', 'current', "found '1_000 A'; a current is needed: 4 A, 400 mA"],
    ['4  A', 'current', "found '4  A'; a current is needed: 4 A, 400 mA"],
    [' 4 A', 'current', "found ' 4 A'; a current is needed: 4 A, 400 mA"],
    ['4 A ', 'current', "found '4 A '; no unit is written 'A '; a current is given in µA, mA, A"],
    ['4 m A', 'current', "found '4 m A'; no unit is written 'm A'; a current is given in µA, mA, A"],
    ['4\u00a0A', 'current', "found '4\u00a0A'; a current is needed: 4 A, 400 mA"],
    ['- 4 A', 'current', "found '- 4 A'; a current is needed: 4 A, 400 mA"],
    ['\u22124 A', 'current', "found '\u22124 A'; a current is needed: 4 A, 400 mA"],
    [
      '4 A\u001b[2J',
      'current',
      "found '4 A\\u001b[2J'; no unit is written 'A\\u001b[2J'; a current is given in µA, mA, A",
    ],
    ['1e400 A', 'current', "found '1e400 A', which is too large a number"],
    ['1e999 V', 'voltage', "found '1e999 V', which is too large a number"],
    [`${'1'.repeat(65)} A`, 'current', 'found a text of 67 characters; a current is needed: 4 A, 400 mA'],
  ])('%j as %s', (text, dimension, message) => {
    expect(() => parseQuantity(text, dimension)).toThrow(expect.objectContaining({ message }));
  });

  it.each<[unknown, string]>([
    [4, 'found the bare number 4; a current needs its unit: 4 A, 400 mA'],
    [null, 'found nothing; a current is needed: 4 A, 400 mA'],
    [undefined, 'found nothing; a current is needed: 4 A, 400 mA'],
    [true, 'found true; a current is needed: 4 A, 400 mA'],
    [['4 A'], 'found a list; a current is needed: 4 A, 400 mA'],
    [{ A: 4 }, 'found a map; a current is needed: 4 A, 400 mA'],
  ])('%j out of a file', (value, message) => {
    expect(() => readQuantity(value, 'current')).toThrow(expect.objectContaining({ message }));
  });

  it('the error carries what was found and what would do', () => {
    try {
      parseQuantity('4 V', 'current');
      expect.unreachable();
    } catch (error) {
      expect(error).toMatchObject({
        code: 'QUANTITY',
        exitCode: 65,
        found: "'4 V', which is a voltage",
        expected: 'a current is needed: 4 A, 400 mA',
      });
    }
  });
});

describe('a share names what it is a share of', () => {
  it.each<[string, Dimension, unknown]>([
    ['140 % of rated-current', 'current', { kind: 'share', ratio: 1.4, of: 'rated-current' }],
    ['140% of rated-current', 'current', { kind: 'share', ratio: 1.4, of: 'rated-current' }],
    ['95 % of open-circuit-voltage', 'voltage', { kind: 'share', ratio: 0.95, of: 'open-circuit-voltage' }],
    ['7 % of dropout-current', 'current', { kind: 'share', ratio: 0.07, of: 'dropout-current' }],
    ['4 A', 'current', { kind: 'absolute', value: 4 }],
    ['5 %', 'ratio', { kind: 'absolute', value: 0.05 }],
  ])('%s', (text, dimension, value) => {
    expect(parseQuantityOrShare(text, dimension)).toEqual(value);
  });

  it.each<[string, Dimension, string]>([
    ['50 % of rated-curent', 'current', "nothing is called 'rated-curent'; did you mean 'rated-current'?"],
    [
      '50 % of nameplate',
      'current',
      "nothing is called 'nameplate'; a share that gives a current refers to rated-current or dropout-current",
    ],
    [
      '50 % of rated-voltage',
      'current',
      "'rated-voltage' is a voltage; a share that gives a current refers to rated-current or dropout-current",
    ],
    ['50 % of rated-current', 'time', "'rated-current' is a current; a time cannot be given as a share"],
    ['50 %', 'current', "found '50 %', but not what it is a share of: 50 % of rated-current"],
    ['50 %', 'time', "found '50 %', which is a ratio; a time is needed: 20 ms, 5 s, 1.5 min"],
    ['50 % of', 'current', "found '50 % of'; no unit is written '% of'; a current is given in µA, mA, A"],
    ['rated-current', 'current', "found 'rated-current'; a current is needed: 4 A, 400 mA"],
    [
      '50 % of toString',
      'current',
      "nothing is called 'toString'; a share that gives a current refers to rated-current or dropout-current",
    ],
    [
      '50 % of rated-current ',
      'current',
      "nothing is called 'rated-current '; did you mean 'rated-current'?",
    ],
  ])('%j as %s', (text, dimension, message) => {
    expect(() => parseQuantityOrShare(text, dimension)).toThrow(expect.objectContaining({ message }));
  });
});

describe('a share of the baseline', () => {
  it.each(everyDimension)('may be one of %s', (dimension) => {
    expect(parseQuantityOrAnyShare('120 % of baseline', dimension)).toEqual({
      kind: 'share',
      ratio: 1.2,
      of: 'baseline',
    });
  });

  it('stands beside all that a share may refer to otherwise', () => {
    expect(readQuantityOrAnyShare('140 % of rated-current', 'current')).toEqual(
      parseQuantityOrShare('140 % of rated-current', 'current'),
    );
    expect(readQuantityOrAnyShare('4 A', 'current')).toEqual({ kind: 'absolute', value: 4 });
    expect(() => parseQuantityOrAnyShare('120 % of basline', 'resistance')).toThrow(
      "nothing is called 'basline'; did you mean 'baseline'?",
    );
    expect(() => readQuantityOrAnyShare(4, 'current')).toThrow('found the bare number 4');
  });

  it('is refused where it can not be known yet', () => {
    expect(() => parseQuantityOrShare('120 % of baseline', 'current')).toThrow(
      "'baseline' is known only when all is done, so only a criterion may refer to it; a share that gives a current refers to rated-current or dropout-current",
    );
    expect(() => parseQuantityOrShare('120 % of baseline', 'time')).toThrow(
      "'baseline' is known only when all is done, so only a criterion may refer to it; a time cannot be given as a share",
    );
  });
});

describe('the pattern that editors check by agrees with the reader', () => {
  const text = fc.oneof(
    fc.string({ maxLength: 12 }),
    fc
      .tuple(
        fc.constantFrom('', '-', '+', '--'),
        fc.constantFrom('4', '2.5', '.5', '5.', '1e-3', '1e', '1e1000', '0x1', '٤'),
        fc.constantFrom('', ' ', '  ', '\n'),
        fc.constantFrom(
          'A',
          'mA',
          'V',
          'mΩ',
          'Mohm',
          'min',
          'degC',
          'K',
          '%',
          'V/h',
          '',
          'X',
          '% of rated-current',
          'A\n',
        ),
      )
      .map((parts) => parts.join('')),
  );

  it('on any text and dimension', () => {
    fc.assert(
      fc.property(text, fc.constantFrom(...everyDimension), (written, dimension) => {
        const plain = new RegExp(quantityPattern(dimension), 'u');
        expect(plain.test(written)).toBe(accepts(() => parseQuantity(written, dimension)));
        const either = new RegExp(quantityOrSharePattern(dimension), 'u');
        expect(either.test(written)).toBe(accepts(() => parseQuantityOrShare(written, dimension)));
      }),
      { numRuns: 1000 },
    );
  });
});

function accepts(read: () => unknown): boolean {
  try {
    read();
    return true;
  } catch (error) {
    if (error instanceof QuantityError) return false;
    throw error;
  }
}
