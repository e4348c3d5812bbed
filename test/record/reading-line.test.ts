import { describe, expect, it } from 'vitest';
import type { TimedEvent } from '../../src/record/journal-event.js';
import { parseLine } from '../../src/record/journal-line.js';
import { ReadingLines } from '../../src/record/reading-line.js';
import fc from '../property.js';

/** What is read of a line, in the middle of others as they stand in a block of a file. */
function readOf(line: string, readings = new ReadingLines()): TimedEvent | undefined {
  const before = '{"t":0,"event":"notice","text":"—"}\n';
  const bytes = Buffer.from(`${before}${line}\n{"t":2,"event":"reading","step":1`);
  const start = Buffer.byteLength(before);
  const reading = readings.read(bytes, start);
  if (reading !== undefined) expect(readings.end).toBe(start + Buffer.byteLength(line) + 1);
  return reading;
}

const count = fc.integer({ min: 1, max: 5_000_000 });
const name = fc.constantFrom(
  'load',
  'meter',
  'voltage',
  'current',
  'output-of-K1',
  'ballast-of-K2',
  'é',
  'a"b',
);
const decimal = fc
  .record({ digits: fc.integer({ min: -1e12, max: 1e12 }), decimals: fc.nat({ max: 12 }) })
  .map(({ digits, decimals }) => Number(`${digits}e-${decimals}`));
const value = fc.oneof(decimal, fc.double({ noNaN: true, noDefaultInfinity: true }), fc.constant(null));
/** As the writer puts it, in the order in which it puts it. */
const written = fc
  .record(
    { t: decimal, step: count, point: count, sample: count, of: name, what: name, at: name, value },
    { requiredKeys: ['t', 'step', 'point', 'sample', 'of', 'what', 'value'] },
  )
  .map(({ t, step, point, sample, of, what, at, value: read }) =>
    JSON.stringify({
      ...{ t, event: 'reading', step, point, sample, of, what },
      ...(at === undefined ? {} : { at }),
      ...(read === null ? { value: null, problem: 'overload' } : { value: read }),
    }),
  );
const plain =
  '{"t":1.25,"event":"reading","step":3,"point":12,"sample":16,"of":"load","what":"current","value":3.998}';

describe('a reading as the writer puts it', () => {
  it('is read without being parsed as JSON', () => {
    expect(readOf(plain)).toEqual(JSON.parse(plain));
    const placed = plain.replace('"value"', '"at":"output-of-K1","value"');
    expect(readOf(placed)).toEqual(JSON.parse(placed));
  });

  it('is read as JSON would be, to the last bit, or left to whoever parses it', () => {
    fc.assert(
      fc.property(fc.array(written, { minLength: 1, maxLength: 5 }), (lines) => {
        const readings = new ReadingLines();
        for (const line of lines) {
          const reading = readOf(line, readings);
          if (reading !== undefined) expect(reading).toStrictEqual(parseLine(line, false));
        }
      }),
      { numRuns: 2000 },
    );
  });

  it('has the number that its digits are nearest to, however they stand', () => {
    fc.assert(
      fc.property(fc.stringMatching(/^-?[0-9]{1,10}(\.[0-9]{0,24})?$/), (digits) => {
        const line = plain.replace('3.998', digits);
        const reading = readOf(line);
        if (reading !== undefined) expect(reading).toStrictEqual(parseLine(line, false));
      }),
      { numRuns: 5000 },
    );
    for (const digits of [
      '0.1',
      '-0',
      '0',
      '9007199254740991',
      '900719925474.0991',
      '0.0000000000000000000001',
    ])
      expect(readOf(plain.replace('3.998', digits))).toStrictEqual(
        parseLine(plain.replace('3.998', digits), false),
      );
  });

  it('with a byte changed, lost or added is never read as anything else than JSON makes of it', () => {
    const change = fc.record({
      at: fc.nat({ max: plain.length }),
      taken: fc.nat({ max: 3 }),
      put: fc.oneof(
        fc.string({ maxLength: 3 }),
        fc.constantFrom('0', '-', '.', '"', ',', '}', ':', '1', ' ', 'e'),
      ),
    });
    fc.assert(
      fc.property(fc.array(change, { minLength: 1, maxLength: 2 }), (changes) => {
        const line = changes
          .reduce((text, { at, taken, put }) => text.slice(0, at) + put + text.slice(at + taken), plain)
          .replaceAll('\n', '');
        const reading = readOf(line);
        if (reading !== undefined) expect(reading).toStrictEqual(parseLine(line, false));
      }),
      { numRuns: 20_000 },
    );
  });

  it.each([
    ['more digits than a double holds', '"value":3.998', '"value":3.9979999999999999'],
    ['an exponent', '"value":3.998', '"value":4e-7'],
    ['no value', '"value":3.998', '"value":null,"problem":"overload"'],
    ['a text that JSON escapes', '"load"', '"lo\\u0061d"'],
    ['a text beyond ASCII', '"load"', '"lâd"'],
    ['a count of nothing', '"sample":16', '"sample":0'],
    ['a zero before its digits', '3.998', '03.998'],
    ['no digit behind its point', '3.998', '3.'],
    ['something behind its end', '3.998}', '3.998} '],
    ['a field more', '3.998}', '3.998,"seal":""}'],
    ['another order', '"step":3,"point":12', '"point":12,"step":3'],
  ])('with %s is left to whoever parses it', (_, from, to) => {
    const line = plain.replace(from, to);
    expect(line).not.toBe(plain);
    expect(readOf(line)).toBeUndefined();
  });

  it('at the end of what is there, without an end of its own, is left to whoever parses it', () => {
    const bytes = Buffer.from(plain);
    for (let length = 0; length <= bytes.length; length += 1)
      expect(new ReadingLines().read(bytes.subarray(0, length), 0)).toBeUndefined();
  });
});
