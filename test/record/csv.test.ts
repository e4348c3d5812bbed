import { parse } from 'csv-parse/sync';
import { describe, expect, it } from 'vitest';
import { csvText, textCell } from '../../src/record/csv.js';
import fc from '../property.js';
import { rfc4180 } from './rfc-4180.js';

const columns = ['record', 'what, or "who"', 'note'] as const;
const anyText = fc.oneof(
  fc.string({ unit: 'binary' }),
  fc
    .array(fc.constantFrom('"', ',', '\r', '\n', '\r\n', ';', ' ', '=', 'Ω', "'"), { maxLength: 8 })
    .map((signs) => signs.join('')),
);
const anyRow = fc.record({ record: anyText, 'what, or "who"': anyText, note: anyText });

describe('a CSV file', () => {
  it('keeps the grammar of RFC 4180 and gives every text back, whatever it was told', () => {
    fc.assert(
      fc.property(fc.array(anyRow, { maxLength: 5 }), (rows) => {
        const text = csvText(columns, rows);
        const read = [[...columns], ...rows.map((row) => columns.map((column) => row[column]))];
        expect(rfc4180(text)).toEqual(read);
        expect(parse(text, { record_delimiter: '\r\n' })).toEqual(read);
      }),
    );
  });

  it('begins with its header and no mark of the byte order, and has as many fields in every line', () => {
    const text = csvText(columns, [{ record: 'K1' }, {}]);
    expect(text).toBe('record,"what, or ""who""",note\r\nK1,,\r\n,,\r\n');
    expect(csvText(columns, [{ note: '35 mΩ' }], { header: false })).toBe(',,35 mΩ\r\n');
  });
});

describe('a text in a cell', () => {
  it.each(['=1+1', '+1', '-1', '@SUM(A1)', '\t=1', '\r=1', '\n=1', '＝1', '＋1', '－1', '＠A1'])(
    '%j gets an apostrophe, by which a spreadsheet takes it for a text',
    (formula) => {
      expect(textCell(formula)).toBe(`'${formula}`);
    },
  );

  it.each(['', 'K1', '15 V brick', 'a=1', "'quoted'", '35 mΩ', '"x"'])('%j stays as it is', (text) => {
    expect(textCell(text)).toBe(text);
  });
});
