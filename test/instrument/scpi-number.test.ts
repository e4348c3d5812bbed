import { describe, expect, it } from 'vitest';
import reference from '../../fixtures/reference/scpi-488.json' with { type: 'json' };
import { formatScpiNumber, parseScpiNumber } from '../../src/instrument/scpi-number.js';
import fc from '../property.js';

const value = (number: number) => ({ kind: 'value', value: number });
const overload = { kind: 'overload' };
const notANumber = { kind: 'not-a-number' };

describe('a numeric reply', () => {
  // Source: IEEE Std 488.2-1992, numeric response data, as public manuals state it (fixtures/reference/scpi-488.json).
  const { NR1, NR2, NR3 } = reference.numeric_response;
  it.each([...NR1.examples, ...NR2.examples, ...NR3.examples.slice(0, 2)])('of the standard, %s', (text) => {
    expect(parseScpiNumber(text)).toEqual(value(Number(text)));
  });

  it.each([
    ['15.1', 15.1],
    ['  15.1  ', 15.1],
    ['+1.510000E+01', 15.1],
    ['1.51e1', 15.1],
    ['5E-3', 0.005],
    ['5E3', 5000],
    ['-0', -0],
    ['.5', 0.5],
    ['5.', 5],
    ['9.8E37', 9.8e37],
    ['1E-400', 0],
  ])('%s is a value', (text, number) => {
    expect(parseScpiNumber(text)).toEqual(value(number));
  });

  // Source: SCPI-99 by public manuals (9.91E37) and from memory (9.9E37, -9.9E37); see the fixture.
  it.each([
    [String(reference.numbers.INF), overload],
    [String(reference.numbers.NINF), overload],
    [String(reference.numbers.NAN), notANumber],
    ['9.9E37', overload],
    ['+9.90000000E+37', overload],
    ['-9.9e+37', overload],
    ['9.89999999E37', overload],
    ['99E36', overload],
    ['1E38', overload],
    ['1E400', overload],
    ['INF', overload],
    ['-inf', overload],
    ['NINF', overload],
    ['9.91E37', notANumber],
    ['+9.91000000E+37', notANumber],
    ['9.9100003e37', notANumber],
    ['NAN', notANumber],
    ['NaN', notANumber],
  ])('%s is never a value', (text, measurement) => {
    expect(parseScpiNumber(text)).toEqual(measurement);
  });

  it.each([
    '',
    ' ',
    '15.1V',
    'VOLT 15.1',
    '1,5',
    '1.5.1',
    '0x10',
    '1e',
    'e5',
    '+',
    '.',
    '--1',
    '1 2',
    'Infinite',
    '1_0',
  ])('"%s" is not understood', (text) => {
    expect(() => parseScpiNumber(text)).toThrow(
      expect.objectContaining({ code: 'REPLY_NOT_UNDERSTOOD' }) as Error,
    );
  });

  it('shows what came, with control characters escaped, and where', () => {
    expect(() =>
      parseScpiNumber('15\x00.1\r', { address: 'tcp://127.0.0.1:5025', question: 'MEAS:VOLT?' }),
    ).toThrow(
      'tcp://127.0.0.1:5025 answered "MEAS:VOLT?" with "15\\x00.1\\r" where a bare number was expected',
    );
  });

  it('of 64 KiB of digits is refused without trying every way to read it', () => {
    const began = performance.now();
    expect(() => parseScpiNumber('1'.repeat(65536))).toThrow();
    expect(() => parseScpiNumber(`${'1'.repeat(299)}x`)).toThrow();
    expect(performance.now() - began).toBeLessThan(2000);
  });

  it('is read as JavaScript reads the same number, in any of its forms', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, min: -9e37, max: 9e37 }), (number) => {
        for (const text of [String(number), number.toExponential(), `+${Math.abs(number)}`, ` ${number}\t`]) {
          expect(parseScpiNumber(text)).toEqual(value(Number(text)));
        }
      }),
    );
  });
});

describe('a number sent to an instrument', () => {
  it.each([
    [4, '4'],
    [0, '0'],
    [-0, '0'],
    [0.1 + 0.2, '0.3'],
    [1e-7, '0'],
    [-1e-9, '0'],
    [0.000001, '0.000001'],
    [100, '100'],
    [15.25, '15.25'],
    [-2.5, '-2.5'],
    [123456.789, '123456.789'],
    [2.5e9, '2.5E+9'],
  ])('%s is written %s', (number, text) => {
    expect(formatScpiNumber(number)).toBe(text);
  });

  it.each([NaN, Infinity, -Infinity])('is never %s', (number) => {
    expect(() => formatScpiNumber(number)).toThrow(RangeError);
  });

  it('is read back as the same number, to half a millionth', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, min: -1e8, max: 1e8 }), (number) => {
        const text = formatScpiNumber(number);
        expect(text).toMatch(/^-?\d+(\.\d{1,6})?$/);
        const back = parseScpiNumber(text);
        expect(back.kind === 'value' && Math.abs(back.value - number)).toBeLessThanOrEqual(
          0.5e-6 + 1e-15 * 1e8,
        );
        expect(back.kind === 'value' && formatScpiNumber(back.value)).toBe(text);
      }),
    );
  });
});
