import { describe, expect, it } from 'vitest';

import { decide, type GuardedValue } from '../../src/statistics/guarded-decision.js';
import fc from '../property.js';

const usable: GuardedValue = {
  value: 4.2,
  standardUncertainty: 0.05,
  expanded: 0.1,
  requirement: { kind: 'at-least', limit: 4 },
};
const decimals = fc.integer({ min: -100_000, max: 100_000 }).map((value) => value / 1000);
const guarded = fc.record({
  value: decimals,
  standardUncertainty: fc.integer({ min: 0, max: 5000 }).map((value) => value / 1000),
  expanded: fc.integer({ min: 0, max: 10_000 }).map((value) => value / 1000),
  requirement: fc.record({ kind: fc.constantFrom('at-least' as const, 'at-most' as const), limit: decimals }),
});

describe('a guarded decision', () => {
  it.each([
    [4.2, 'conforms'],
    [4.1, 'conforms'],
    [4.09, 'undecided'],
    [4, 'undecided'],
    [3.9, 'undecided'],
    [3.89, 'does-not-conform'],
  ])('for at least 4 A with ±0.1 A, %d A: %s', (value, outcome) => {
    expect(decide({ ...usable, value }).outcome).toBe(outcome);
  });

  it.each([
    [91.9, 'conforms'],
    [92, 'conforms'],
    [92.1, 'undecided'],
    [108, 'undecided'],
    [108.1, 'does-not-conform'],
  ])('for at most 100 with ±8, %d: %s', (value, outcome) => {
    const measured = {
      value,
      standardUncertainty: 4,
      expanded: 8,
      requirement: { kind: 'at-most', limit: 100 },
    } as const;
    expect(decide(measured).outcome).toBe(outcome);
  });

  it('counts a value on the acceptance limit as conforming, whatever decimals do in binary', () => {
    // 12.12 - 0.04 is 12.079999999999998 in doubles.
    const measured = {
      value: 12.08,
      standardUncertainty: 0.02,
      expanded: 0.04,
      requirement: { kind: 'at-most', limit: 12.12 },
    } as const;
    expect(decide(measured).outcome).toBe('conforms');
    expect(decide({ ...measured, value: 12.16 }).outcome).toBe('undecided');
  });

  it('leaves nothing undecided without uncertainty, and the limit itself conforms', () => {
    const exact = { ...usable, standardUncertainty: 0, expanded: 0 };
    expect(decide({ ...exact, value: 4 })).toEqual({ outcome: 'conforms', probability: 1 });
    expect(decide({ ...exact, value: 3.999999 })).toEqual({ outcome: 'does-not-conform', probability: 0 });
  });

  it('is undecided whenever nothing can be said', () => {
    expect(decide({ ...usable, expanded: Infinity }).outcome).toBe('undecided');
  });

  it('gives an even chance on the limit, and less certainty with fewer degrees of freedom', () => {
    expect(decide({ ...usable, value: 4 }).probability).toBe(0.5);
    expect(decide({ ...usable, degreesOfFreedom: 3 }).probability).toBeLessThan(decide(usable).probability);
    expect(decide({ ...usable, degreesOfFreedom: Infinity }).probability).toBe(decide(usable).probability);
  });

  it('is the mirror image for the other side of the limit', () => {
    fc.assert(
      fc.property(guarded, (measured) => {
        const { kind, limit } = measured.requirement;
        const mirrored = {
          ...measured,
          value: -measured.value,
          requirement: {
            kind: kind === 'at-least' ? ('at-most' as const) : ('at-least' as const),
            limit: -limit,
          },
        };
        expect(decide(mirrored)).toEqual(decide(measured));
      }),
    );
  });

  it('never turns worse when the value moves to the good side', () => {
    const rank = { 'does-not-conform': 0, undecided: 1, conforms: 2 };
    fc.assert(
      fc.property(guarded, fc.integer({ min: 0, max: 9000 }), (measured, thousandths) => {
        const better =
          measured.value + (measured.requirement.kind === 'at-least' ? 1 : -1) * (thousandths / 1000);
        const [now, then] = [decide(measured), decide({ ...measured, value: better })];
        expect(rank[then.outcome]).toBeGreaterThanOrEqual(rank[now.outcome]);
        expect(then.probability).toBeGreaterThanOrEqual(now.probability);
      }),
    );
  });

  describe('between two limits', () => {
    const between = (value: number, expanded = 0.1, least = 4, most = 5): GuardedValue => ({
      value,
      standardUncertainty: expanded / 2,
      expanded,
      requirement: { kind: 'between', least, most },
    });

    it.each([
      [4.5, 'conforms'],
      [4.1, 'conforms'],
      [4.9, 'conforms'],
      [4.09, 'undecided'],
      [4.91, 'undecided'],
      [3.9, 'undecided'],
      [5.1, 'undecided'],
      [3.89, 'does-not-conform'],
      [5.11, 'does-not-conform'],
    ])('of 4 and 5, %d ± 0.1: %s', (value, outcome) => {
      expect(decide(between(value)).outcome).toBe(outcome);
    });

    it('closer than its guard bands accepts nothing', () => {
      expect(decide(between(4.5, 0.51)).outcome).toBe('undecided');
      expect(decide(between(4.5, 0.5)).outcome).toBe('conforms');
    });

    it('is as probable as both its sides together, and keeps its digits far out', () => {
      fc.assert(
        fc.property(decimals, decimals, decimals, (value, one, other) => {
          const [least, most] = [Math.min(one, other), Math.max(one, other)];
          const measured = between(value, 4, least, most);
          const above = decide({ ...measured, requirement: { kind: 'at-least', limit: least } });
          const below = decide({ ...measured, requirement: { kind: 'at-most', limit: most } });
          const { probability } = decide(measured);
          expect(probability).toBeGreaterThanOrEqual(0);
          expect(probability).toBeCloseTo(above.probability + below.probability - 1, 12);
        }),
      );
      // Ten standard uncertainties above the upper limit; the lower one is another ten away.
      const far = decide(between(6, 0.2));
      const upper = decide({ ...between(6, 0.2), requirement: { kind: 'at-most', limit: 5 } });
      expect(far.probability / upper.probability).toBeCloseTo(1, 12);
      expect(far.probability).toBeGreaterThan(0);
    });

    it('without uncertainty is met on its limits', () => {
      expect(decide(between(5, 0))).toEqual({ outcome: 'conforms', probability: 1 });
      expect(decide(between(5.001, 0))).toEqual({ outcome: 'does-not-conform', probability: 0 });
    });

    it('refuses limits in the wrong order, or that are no numbers', () => {
      expect(() => decide(between(4.5, 0.1, 5, 4))).toThrow('the limits are 5 and 4, in the wrong order');
      expect(() => decide(between(4.5, 0.1, 4, Number.NaN))).toThrow('the limit is NaN');
    });
  });

  it('refuses what is no number', () => {
    expect(() => decide({ ...usable, value: Number.NaN })).toThrow(/the value is NaN/);
    expect(() => decide({ ...usable, requirement: { kind: 'at-most', limit: Infinity } })).toThrow(
      /the limit is Infinity/,
    );
    expect(() => decide({ ...usable, standardUncertainty: -1 })).toThrow(/standard uncertainty is -1/);
    expect(() => decide({ ...usable, expanded: Number.NaN })).toThrow(/expanded uncertainty is NaN/);
    expect(() => decide({ ...usable, degreesOfFreedom: 0 })).toThrow(/0 degrees of freedom/);
  });
});
