import { describe, expect, it } from 'vitest';
import { nr3, numberParameter } from '../../../src/simulation/dialects/scpi-number.js';
import fc from '../../property.js';

const amperes = { unit: 'A', least: 0, most: 40 } as const;

describe('a number that is sent to an instrument', () => {
  it.each([
    ['2', 2],
    ['+2.50', 2.5],
    ['.5', 0.5],
    ['5.', 5],
    ['25E-1', 2.5],
    ['2.5e+0', 2.5],
    ['2.5 A', 2.5],
    ['2500mA', 2.5],
    ['2500 MA', 2.5],
    ['0.001KA', 1],
    ['MIN', 0],
    ['maximum', 40],
  ])('%s is taken as %d', (text, value) => {
    expect(numberParameter(text, amperes)).toEqual({ value: expect.closeTo(value, 12) as number });
  });

  // Numbers of SCPI-99, volume 2, 21.8.
  it.each([
    ['ON', -104],
    ['two', -104],
    ['2,5', -104],
    ['', -104],
    ['2 V', -131],
    ['2 XA', -131],
    ['-1', -222],
    ['40.001', -222],
  ])('%j goes on the error queue as %d', (text, error) => {
    expect(numberParameter(text, amperes)).toEqual({ error });
  });
});

describe('a number that is sent by an instrument', () => {
  it.each([
    [15.21, '+1.521000E+01'],
    [-0.0182, '-1.820000E-02'],
    [0, '+0.000000E+00'],
    [1e-12, '+1.000000E-12'],
    // SCPI-99, volume 1, 7.2.1.4 and 7.2.1.5.
    [Number.POSITIVE_INFINITY, '+9.9E+37'],
    [Number.NEGATIVE_INFINITY, '-9.9E+37'],
    [Number.NaN, '+9.91E+37'],
  ])('%d reads %s', (value, text) => {
    expect(nr3(value)).toBe(text);
  });

  it('has the form of NR3 and keeps seven digits', () => {
    fc.assert(
      fc.property(fc.double({ min: -1e6, max: 1e6, noNaN: true }), (value) => {
        expect(nr3(value)).toMatch(/^[+-]\d\.\d+E[+-]\d{2,}$/);
        expect(Math.abs(Number(nr3(value)) - value)).toBeLessThanOrEqual(Math.abs(value) * 1e-6);
      }),
    );
  });
});

it('a number as long as the input buffer is refused without trying every way to read it', () => {
  const text = `${'0'.repeat(65_536)}!`;
  const began = process.cpuUsage();
  expect(numberParameter(text, { unit: 'A', least: 0, most: 8 })).toEqual({ error: -104 });
  const { user, system } = process.cpuUsage(began);
  expect((user + system) / 1e6).toBeLessThan(2);
});
