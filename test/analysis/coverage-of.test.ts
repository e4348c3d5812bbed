import { expect, it } from 'vitest';
import { coverageOf } from '../../src/analysis/coverage-of.js';
import { inWords, measured } from '../../src/analysis/finding.js';
import { promised } from '../../src/analysis/promised-errors.js';

const scatter = { name: 'scatter', kind: 'A', uncertainty: 1, degreesOfFreedom: 16 } as const;

it('is the factor by which the interval was made, and its degrees of freedom', () => {
  // JCGM 100:2008, table G.2: t for 95 % is 2.12 at 16 degrees of freedom, 1.96 at infinitely many.
  const byScatter = coverageOf(measured('droop-resistance', 'resistance', 5, [scatter], { step: 1 }));
  expect(byScatter?.factor).toBeCloseTo(2.12, 2);
  expect(byScatter?.degreesOfFreedom).toBeCloseTo(16, 9);
  const byPromise = coverageOf(measured('usable-current', 'current', 5, [promised('gain', 1)], { step: 1 }));
  expect(byPromise?.factor).toBeCloseTo(1.96, 2);
  expect(byPromise?.degreesOfFreedom).toBe(Infinity);
});

it('is none where an interval was made in another way, or there is none', () => {
  const finding = measured('thermal-time-constant', 'time', 700, [scatter], { step: 1 });
  expect(coverageOf({ ...finding, interval: [690, 712] })).toBeUndefined();
  expect(coverageOf({ ...finding, interval: null })).toBeUndefined();
  expect(coverageOf({ ...finding, budget: [] })).toBeUndefined();
  expect(coverageOf(inWords('limit-style', 'hiccup', { step: 1 }))).toBeUndefined();
});
