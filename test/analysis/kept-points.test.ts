import { describe, expect, it } from 'vitest';
import { KeptPoints, mostGroups } from '../../src/analysis/kept-points.js';
import type { PointEvidence } from '../../src/analysis/point-evidence.js';
import { taken } from '../../src/analysis/pooled-points.js';
import { lookOf, type LookGiven, saidBy } from './looks-of.js';

function kept(count: number, given: (index: number) => Partial<LookGiven> = () => ({})) {
  const points = new KeptPoints();
  for (let index = 0; index < count; index += 1) {
    points.add(lookOf({ t: 10 * index, voltages: [15 + (index % 7) / 1000], ...given(index) }));
  }
  return points.all();
}

/** Of what is kept after each look, at most. */
const bound = 1 + mostGroups + 4096 + 512;
const hour = 3600;

describe('the points that are kept of a step', () => {
  it('are all of them, to the last digit, where a soak is of ordinary length', () => {
    const looks = Array.from({ length: mostGroups }, (_, index) =>
      lookOf({ t: 10 * index, voltages: [15, 15 + index / 1e5], point: index + 1 }),
    );
    const points = new KeptPoints();
    for (const look of looks) points.add(look);
    expect(points.all().map(saidBy)).toEqual(looks.map(saidBy));
  });

  it('are all of them, however many, where each was taken at a current of its own', () => {
    const ramp = kept(12_000, (index) => ({ phase: 'ramp', set: { current: index / 1000 } }));
    expect(ramp.map(({ set }) => set.current)).toEqual(ramp.map((_, index) => index / 1000));
    const level = kept(12_000, () => ({ phase: 'ramp' }));
    expect([level.length, taken(level)]).toEqual([12_000, 12_000]);
  });

  it('are no more for a soak of weeks than for one of days, and stand for every look', () => {
    const [days, weeks] = [kept(30_000), kept(200_000)];
    expect(Math.max(days.length, weeks.length)).toBeLessThan(bound);
    expect(weeks.length).toBeLessThan(1.5 * days.length);
    expect([taken(days), taken(weeks)]).toEqual([30_000, 200_000]);
    const readings = weeks.reduce((sum, { moduleVoltage }) => sum + moduleVoltage.count, 0);
    expect(readings).toBe(200_000);
  });

  it('are the first look and those of the last hour one by one, and before it groups of one size', () => {
    const [first, ...rest] = kept(100_000);
    const end = 10 * 99_999;
    expect([first?.t, first?.looks, rest.at(-1)?.t, rest.at(-1)?.looks]).toEqual([0, 1, end, 1]);
    for (const { t, looks } of rest) if (t >= end - hour) expect(looks).toBe(1);
    const groups = rest.filter(({ looks }) => looks > 1);
    expect(groups.length).toBeGreaterThan(mostGroups / 2 - 1);
    expect(new Set(groups.slice(0, -1).map(({ looks }) => looks)).size).toBe(1);
    expect(rest.map(({ t }) => t)).toEqual(rest.map(({ t }) => t).sort((one, other) => one - other));
  });

  it('are no more than so many of the last hour where a journal from elsewhere has thousands in it', () => {
    expect(kept(60_000, (index) => ({ t: index / 100 })).length).toBeLessThan(bound);
  });

  it('are groups that ended the same way: a look that was never ended is not hidden in one', () => {
    const odd = kept(40_000, (index) => (index === 5_000 ? { outcome: 'measured' } : {}));
    const outcomes = odd.filter(({ outcome }) => outcome === 'measured');
    expect(outcomes.map(({ looks }) => looks)).toEqual([1]);
    expect(taken(odd)).toBe(40_000);
  });

  it('begin a row of their own after each change of what is looked at', () => {
    const points: readonly PointEvidence[] = kept(30_000, (index) =>
      index < 10_000 ? { phase: 'idle', set: {} } : { set: { current: index < 20_000 ? 4 : 5 } },
    );
    const inRow = (current: number | undefined) => points.filter(({ set }) => set.current === current);
    expect([undefined, 4, 5].map((current) => taken(inRow(current)))).toEqual([10_000, 10_000, 10_000]);
    expect([undefined, 4, 5].map((current) => inRow(current)[0]?.looks)).toEqual([1, 1, 1]);
  });
});
