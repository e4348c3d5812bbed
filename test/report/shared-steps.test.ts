import { describe, expect, it } from 'vitest';
import { comparisonAsText } from '../../src/report/comparison-text.js';
import type { Result } from '../../src/report/result.js';
import { sharedSteps } from '../../src/report/shared-steps.js';
import { plainStyle } from '../../src/report/style.js';
import { evidenceOf } from '../analysis/evidence-of.js';
import { recordsOf } from './compared-records.js';
import { resultOf } from './fixed-record.js';

const fixed = resultOf();
const began = '2026-12-01T08:30:00.000Z';

/** A record of so many steps; the first of them were taken over, up to such a one from each of these. */
function record(run: string, steps: number, taken: readonly (readonly [Result, number])[] = []): Result {
  const evidence = evidenceOf(Array.from({ length: steps }, () => ({ kind: 'open-circuit' })));
  const resumed = taken.map(([from, upTo]) => ({
    event: 'resumed' as const,
    run: from.run,
    header: from.fingerprints.header,
    began,
    steps: upTo,
  }));
  const fingerprints = { header: `header of ${run}`, lastSeal: `seal of ${run}` };
  return { ...fixed, run, evidence: { ...evidence, resumed }, fingerprints };
}

const first = record('first', 3);
const second = record('second', 4, [[first, 2]]);
const third = record('third', 5, [
  [first, 2],
  [second, 3],
]);

describe('what two records share', () => {
  it.each([
    ['resumed from the other', first, second, [{ run: 'first', first: 1, last: 2 }]],
    ['which is the same seen from the other side', second, first, [{ run: 'first', first: 1, last: 2 }]],
    [
      'resumed again',
      second,
      third,
      [
        { run: 'first', first: 1, last: 2 },
        { run: 'second', first: 3, last: 3 },
      ],
    ],
    [
      'both resumed from a third, one of them earlier',
      record('one', 4, [[first, 1]]),
      second,
      [{ run: 'first', first: 1, last: 1 }],
    ],
    ['each of its own', first, record('other', 3), []],
  ])('is what one took over: %s', (_, before, after, shared) => {
    expect(sharedSteps(before, after)).toEqual(shared);
  });

  it('is found though the folder was given another name since', () => {
    expect(sharedSteps({ ...first, run: 'kept' }, second)).toEqual([{ run: 'kept', first: 1, last: 2 }]);
  });

  it('is warned of before all else, and of a record with itself is not', () => {
    const text = (before: Result, after: Result): string =>
      comparisonAsText(recordsOf(before, after), plainStyle);
    expect(text(first, second)).toContain(
      "THE SAME READINGS: steps 1 to 2 of both records hold what was measured once, in first: what rests on that alone can't differ, and tells of no change.",
    );
    expect(text(record('one', 4, [[first, 1]]), second)).toContain('step 1 of both records holds what was');
    expect(text(first, first)).not.toContain('THE SAME READINGS');
    expect(text(first, record('other', 3))).not.toContain('THE SAME READINGS');
  });
});
