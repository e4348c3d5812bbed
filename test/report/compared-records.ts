import type { Finding } from '../../src/analysis/finding.js';
import { compare } from '../../src/judgement/compare.js';
import type { ToleranceEntry } from '../../src/record/baseline.js';
import type { ComparedRecords } from '../../src/report/comparison.js';
import type { Result } from '../../src/report/result.js';
import { droopOf, relationOf } from '../judgement/a-baseline.js';
import { resultOf } from './fixed-record.js';

export const asked: readonly ToleranceEntry[] = [
  { finding: 'earth-relation', expected: { kind: 'becomes', word: 'isolated' } },
  { finding: 'droop-resistance', expected: { kind: 'within', limit: { kind: 'share', ratio: 0.2 } } },
  { finding: 'limit-style', expected: { kind: 'same' } },
];

export const bonded = [relationOf('bonded'), droopOf(0.018)];
export const isolated = [relationOf('isolated'), droopOf(0.018)];
export const damaged = [relationOf('isolated'), droopOf(0.036)];

const fixed = resultOf();

export function recordOf(run: string, findings: readonly Finding[], more: Partial<Result> = {}): Result {
  return { ...fixed, run, findings, ...more };
}

export function recordsOf(before: Result, after: Result, tolerance = asked): ComparedRecords {
  const sideOf = ({ header, findings }: Result) => ({
    modules: header.modules.map(({ name }) => name),
    findings,
  });
  return {
    before,
    after,
    tolerance: { name: 'earth-link-removed', title: 'After removing the earth link' },
    comparison: compare(sideOf(before), sideOf(after), tolerance),
  };
}
