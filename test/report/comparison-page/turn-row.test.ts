import { expect, it } from 'vitest';
import { measured } from '../../../src/analysis/finding.js';
import { turnRow } from '../../../src/report/comparison-page/turn-row.js';
import { bothSides } from '../../../src/report/comparison-page/sides.js';
import type { ComparedRecords } from '../../../src/report/comparison.js';
import { recordOf, recordsOf } from '../compared-records.js';

const budget = [{ name: 'all', kind: 'B', uncertainty: 0.02, degreesOfFreedom: Infinity }] as const;
const drops = (value: number) => [measured('dropout-current', 'current', value, budget, { step: 1 })];

function rowOf(records: ComparedRecords) {
  const [compared] = records.comparison.findings;
  if (compared === undefined) throw new Error('nothing was compared');
  return turnRow('drops out', compared, { sides: bothSides(records), sameModules: true });
}

it('a turn that one record alone has is said to be in that one only', () => {
  const earlier = rowOf(recordsOf(recordOf('before', drops(5)), recordOf('after', []), []));
  expect(earlier.name).toMatch(/^drops out .*, earlier only$/);
  expect(earlier.places.map(({ shape }) => shape)).toEqual(['circle']);
  const later = rowOf(recordsOf(recordOf('before', []), recordOf('after', drops(5)), []));
  expect(later.name).toMatch(/^drops out .*, later only$/);
  expect(later.places.map(({ shape }) => shape)).toEqual(['diamond']);
});

it('a turn of both goes from the earlier to the later, with an arrow where it moved', () => {
  const { name, places, moved } = rowOf(
    recordsOf(recordOf('before', drops(5)), recordOf('after', drops(4)), []),
  );
  expect(name).not.toContain('only');
  expect(places.map(({ at }) => at)).toEqual([5, 4]);
  expect(moved).toBeDefined();
});
