import { expect, it } from 'vitest';
import { inWords, measured, type Finding } from '../../../src/analysis/finding.js';
import type { ToleranceEntry } from '../../../src/record/baseline.js';
import { allowanceFigure } from '../../../src/report/comparison-page/allowance-chart.js';
import { changesSection } from '../../../src/report/comparison-page/changes-section.js';
import type { ComparedRecords } from '../../../src/report/comparison.js';
import { recordOf, recordsOf } from '../compared-records.js';
import { readRows, type RowsRead } from './read-rows.js';

const tolerance: readonly ToleranceEntry[] = [
  { finding: 'dropout-current', expected: { kind: 'within', limit: { kind: 'share', ratio: 0.05 } } },
];

function dropsAt(value: number, expanded = 0.05): Finding {
  const budget = [
    { name: 'all', kind: 'B', uncertainty: expanded / 1.96, degreesOfFreedom: Infinity },
  ] as const;
  return measured('dropout-current', 'current', value, budget, { step: 1 });
}

function between(before: Finding, after: Finding): ComparedRecords {
  return recordsOf(recordOf('before', [before]), recordOf('after', [after]), tolerance);
}

function changesOf(records: ComparedRecords): RowsRead {
  return readRows(String(changesSection(records)), 'change-1');
}

it('what is allowed is shaded about the earlier value, not about the later', () => {
  const { band } = changesOf(between(dropsAt(4), dropsAt(5)));
  expect(band?.from).toBeCloseTo(3.8, 2);
  expect(band?.to).toBeCloseTo(4.2, 2);
});

it('a value is drawn with the interval that it was found with', () => {
  const { rows } = changesOf(between(dropsAt(4, 0.1), dropsAt(5, 0.2)));
  expect(rows.map(({ goesOn }) => goesOn)).toEqual([false, false]);
  const ends = rows.map(({ between: [low, high] = [NaN, NaN] }) => [low, high] as const);
  expect(ends[0]?.[0]).toBeCloseTo(3.9, 2);
  expect(ends[0]?.[1]).toBeCloseTo(4.1, 2);
  expect(ends[1]?.[0]).toBeCloseTo(4.8, 2);
  expect(ends[1]?.[1]).toBeCloseTo(5.2, 2);
});

it('a least value has an arrow on to more in place of an interval, and nothing is shaded about an earlier one', () => {
  const least: Finding = { ...dropsAt(4), bound: 'least' };
  const later = changesOf(between(dropsAt(4.6), least));
  expect(later.rows.map(({ goesOn }) => goesOn)).toEqual([false, true]);
  expect(later.rows[1]?.between).toBeUndefined();
  expect(later.band?.from).toBeCloseTo(4.37, 2);
  const earlier = changesOf(between(least, dropsAt(3)));
  expect(earlier.rows.map(({ goesOn }) => goesOn)).toEqual([true, false]);
  expect(earlier.band).toBeUndefined();
});

it('of what is allowed the bars hold the difference with 95 %, to either side alike', () => {
  const records = between(dropsAt(4, 0.06), dropsAt(4.1, 0.08));
  const { rows, band } = readRows(String(allowanceFigure(records)), 'allowance');
  const [row] = rows;
  expect(band?.from).toBeCloseTo(-100, 0);
  expect(band?.to).toBeCloseTo(100, 0);
  // 0.1 A of 0.2 A that are allowed, and 0.06 A with 0.08 A make 0.1 A: from nothing to all of it.
  expect(row?.value).toBeCloseTo(50, 0);
  expect(row?.between?.[0]).toBeCloseTo(0, 0);
  expect(row?.between?.[1]).toBeCloseTo(100, 0);
});

it('words that changed stand in a table, with no chart', () => {
  const style = (word: string): Finding => inWords('limit-style', word, { step: 1 });
  const records = recordsOf(recordOf('before', [style('hiccup')]), recordOf('after', [style('foldback')]), [
    { finding: 'limit-style', expected: { kind: 'same' } },
  ]);
  const text = String(changesSection(records));
  expect(text).toContain('data-of="moved"');
  expect(text).not.toContain('<svg');
});
