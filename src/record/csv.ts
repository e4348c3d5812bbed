import { stringify } from 'csv-stringify/sync';

/**
 * Rows as CSV (RFC 4180): commas, lines that end in CR LF, quotes where a cell needs them. UTF-8 without a mark of
 * its byte order, which RFC 4180 does not know and programs take for part of the first name.
 */
export function csvText<Column extends string>(
  columns: readonly Column[],
  rows: readonly Partial<Readonly<Record<Column, string>>>[],
  { header = true } = {},
): string {
  return stringify([...rows], {
    header,
    columns: [...columns],
    record_delimiter: 'windows',
    // Half of an end of a line is one to some readers; of itself the library quotes the whole one alone.
    quoted_match: /[\r\n]/,
  });
}

/**
 * A text as a cell that no spreadsheet takes for a formula: what begins as one gets an apostrophe before it. (Which
 * signs begin one: common practice, no published standard; the wide ones are taken for the narrow by some.) Texts of
 * ours begin with a letter, but a record may be somebody else's.
 */
export function textCell(text: string): string {
  return /^[=+\-@\t\r\n\uff1d\uff0b\uff0d\uff20]/.test(text) ? `'${text}` : text;
}
