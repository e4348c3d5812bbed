import { describe, expect, it } from 'vitest';
import type { RunHeader } from '../../../src/record/run-header.js';
import { doneBetween } from '../../../src/report/comparison-page/done-between.js';
import { headerOf } from '../../analysis/evidence-of.js';

const link = 'earth link taken out';

/** K1's record of that day, with what its file said then. */
function on(day: string, ...changes: readonly (readonly [date: string, what: string])[]): RunHeader {
  const header = headerOf();
  return {
    ...header,
    began: `${day}T09:00:00.000Z`,
    modules: header.modules.map((module) => ({
      ...module,
      changes: changes.map(([date, what]) => ({ date, what })),
    })),
  };
}

describe('what was done to a module between two records', () => {
  it.each([
    ['2026-11-14', `Done to K1 in between, by its file: ${link} (2026-11-14).`],
    [
      '2026-10-31',
      `Written into the file of K1 since the earlier record: ${link} (2026-10-31). By that date it was done before the earlier record too, so it tells the two not apart.`,
    ],
    [
      '2026-11-01',
      `Written into the file of K1 since the earlier record: ${link} (2026-11-01). That is the day of the earlier record: whether it was done before that or after, the date does not tell.`,
    ],
    [
      '2026-12-01',
      `Written into the file of K1 since the earlier record: ${link} (2026-12-01). That is the day of the later record: whether it was done before that or after, the date does not tell.`,
    ],
    [
      '2027-01-05',
      `Written into the file of K1 since the earlier record: ${link} (2027-01-05). That date is after the later record: see that it is right.`,
    ],
  ])('is told by the date, %s, and not by the earlier file alone', (date, sentence) => {
    expect(doneBetween(on('2026-11-01'), on('2026-12-01', [date, link]))).toEqual([sentence]);
  });

  it('is told in the order of time, whichever record is given first', () => {
    const [earlier, later] = [on('2026-11-01'), on('2026-12-01', ['2026-11-14', link])];
    expect(doneBetween(later, earlier)).toEqual(doneBetween(earlier, later));
  });

  it('is missed where it stands in the file no longer', () => {
    const kept = ['2026-01-02', 'fan replaced'] as const;
    expect(doneBetween(on('2026-11-01', kept, ['2026-03-04', link]), on('2026-12-01', kept))).toEqual([
      `No longer in the file of K1, and it was there before: ${link} (2026-03-04).`,
    ]);
  });

  it('is nothing where both files say the same, and of another module', () => {
    const same = ['2026-01-02', link] as const;
    expect(doneBetween(on('2026-11-01', same), on('2026-12-01', same))).toEqual([]);
    const later = on('2026-12-01', ['2026-11-14', link]);
    const other = { ...later, modules: later.modules.map((module) => ({ ...module, name: 'K2' })) };
    expect(doneBetween(on('2026-11-01'), other)).toEqual([]);
  });
});
