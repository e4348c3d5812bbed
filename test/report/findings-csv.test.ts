import { describe, expect, it } from 'vitest';
import { findingNamed } from '../../src/analysis/finding.js';
import { findingsAsCsv, findingsColumns, type RecordListed } from '../../src/report/findings-csv.js';
import type { Result } from '../../src/report/result.js';
import { eventsOf } from '../analysis/evidence-of.js';
import fc from '../property.js';
import { rfc4180 } from '../record/rfc-4180.js';
import { header, resultOf } from './fixed-record.js';

const whole = resultOf();

function rowsOf(...records: readonly RecordListed[]): Readonly<Record<string, string>>[] {
  const [head = [], ...rows] = rfc4180(findingsAsCsv(records));
  expect(head).toEqual([...findingsColumns]);
  return rows.map((row) => Object.fromEntries(row.map((cell, at) => [head[at] ?? '', cell])));
}

const listed = (result: Result): RecordListed => ({ kind: 'result', result });

describe('the findings of records as CSV', () => {
  it('has a row for each finding, and one for what was required and not found', () => {
    const rows = rowsOf(listed(whole));
    expect(rows.map((row) => row['finding'])).toEqual([
      ...whole.findings.map(({ name }) => name),
      'temperature-rise',
    ]);
    expect(rows.at(-1)).toMatchObject({
      value: '',
      unit: '',
      required: 'at most 40 K',
      decision: 'undecided',
      note: 'was not measured',
    });
  });

  it('says on each row whose it is, so that rows may be sorted, narrowed and parted', () => {
    for (const row of rowsOf(listed(whole)))
      expect(row).toMatchObject({
        record: whole.run,
        began: '2026-12-01T08:30:00.000Z',
        module: 'K1',
        circuit: 'single',
        procedure: 'real-limit',
        simulated: 'yes',
        ended: 'completed',
        integrity: 'whole',
        outcome: 'does-not-conform',
      });
  });

  it('gives numbers as plain decimals in the unit beside them, and words without one', () => {
    const rows = rowsOf(listed(whole));
    const of = (name: string) => rows.find((row) => row['finding'] === name);
    const droop = findingNamed(whole.findings, 'droop-resistance');
    expect(of('droop-resistance')).toMatchObject({ unit: 'Ohm', decision: 'undecided' });
    expect(Number(of('droop-resistance')?.['value'])).toBeCloseTo(Number(droop?.value), 9);
    expect(Number(of('droop-resistance')?.['low 95 %'])).toBeCloseTo(droop?.interval?.[0] ?? NaN, 9);
    const regulation = findingNamed(whole.findings, 'load-regulation');
    expect(of('load-regulation')).toMatchObject({ unit: '%' });
    expect(Number(of('load-regulation')?.['value'])).toBeCloseTo(100 * Number(regulation?.value), 7);
    expect(of('limit-style')).toMatchObject({ value: 'hiccup', unit: '', 'low 95 %': '' });
    const numbers = rows.flatMap((row) => [
      row['value'] ?? '',
      row['low 95 %'] ?? '',
      row['high 95 %'] ?? '',
    ]);
    expect(numbers.filter((cell) => /^-?\d+(\.\d+)?e/i.test(cell))).toEqual([]);
    expect(numbers.filter((cell) => /^-?\d+(\.\d+)?$/.test(cell)).length).toBeGreaterThan(20);
  });

  it('leaves out what has no number: an interval without an end, a value without a bound', () => {
    const [one] = whole.findings;
    if (one === undefined) throw new Error('the record has findings');
    const open = {
      ...one,
      value: 3e-9,
      interval: [-Infinity, 4] as const,
      bound: 'least' as const,
      step: null,
    };
    const [row] = rowsOf(listed({ ...whole, findings: [open], decisions: [] }));
    expect(row).toMatchObject({
      value: '0.000000003',
      'low 95 %': '',
      'high 95 %': '',
      bound: 'least',
      step: '',
    });
    const [none] = rowsOf(listed({ ...whole, findings: [{ ...open, value: Infinity }], decisions: [] }));
    expect(none).toMatchObject({ value: '' });
  });

  it('tells all that is required of one finding in its row', () => {
    const more = { finding: 'usable-current', requirement: 'at most 6 A', outcome: 'undecided' } as const;
    const decisions = [...whole.decisions, { ...more, probability: null, note: '' }];
    const row = rowsOf(listed({ ...whole, decisions })).find((one) => one['finding'] === 'usable-current');
    expect(row).toMatchObject({
      required: 'at least 4 A (100 % of rated-current); at most 6 A',
      decision: 'conforms; undecided',
    });
  });

  it('has a row of a record that shows nothing, and of one that can not be read', () => {
    const empty = resultOf(eventsOf([], false), { ...header, criteria: [] });
    expect(
      rowsOf(listed(empty), { kind: 'unreadable', run: 'spoilt', why: 'run.json is no JSON' }),
    ).toMatchObject([
      { ended: 'cut-off', integrity: 'cut-off', outcome: 'not-judged', finding: '', value: '' },
      { record: 'spoilt', ended: 'unreadable', outcome: '', finding: '', note: 'run.json is no JSON' },
    ]);
  });

  it('is by RFC 4180, a line a row, and holds no formula, however things are called', () => {
    const anyText = fc
      .tuple(fc.constantFrom('', '=', '+', '-', '@', '\t=', '＝', '"', '\r\n'), fc.string({ unit: 'binary' }))
      .map((parts) => parts.join(''));
    fc.assert(
      fc.property(anyText, anyText, (name, note) => {
        const modules = whole.header.modules.map((module) => ({ ...module, name }));
        const findings = whole.findings.map((finding) => ({ ...finding, note }));
        const text = findingsAsCsv([
          listed({ ...whole, run: name, header: { ...header, modules }, findings }),
        ]);
        const rows = rfc4180(text);
        expect(text.split('\r\n')).toHaveLength(rows.length + 1);
        const formulas = rows.flat().filter((cell) => /^[=+@\t\r\n＝＋－＠]/.test(cell) || /^-\D/.test(cell));
        expect(formulas).toEqual([]);
      }),
      { numRuns: 50 },
    );
  });
});
