import { describe, expect, it } from 'vitest';
import { leastOf, probabilityBelow } from '../../src/arrangement/least-of.js';
import type { Taken } from '../../src/arrangement/module-profile.js';
import { randomFrom } from '../../src/statistics/random.js';
import fc from '../property.js';
import { madeSource } from './made-profile.js';

const from = madeSource('K1', 'usable');

/** Errors by name: `own` is the number's own, all others are shared with whoever has one of that name. */
function number(value: number, errors: Readonly<Record<string, number>>): Taken {
  const total = Math.hypot(...Object.values(errors));
  return {
    value,
    interval: [value - 1.959964 * total, value + 1.959964 * total],
    budget: Object.entries(errors).map(([name, uncertainty]) => ({
      name,
      kind: 'B',
      uncertainty,
      degreesOfFreedom: Number.POSITIVE_INFINITY,
      shared: name === 'own' ? undefined : name,
    })),
    from,
    note: '',
  };
}

/** The same by drawing lots, 100 000 times. */
function drawn(numbers: readonly Taken[]): readonly number[] {
  const random = randomFrom(11);
  const least = Array.from({ length: 100_000 }, () => {
    const shared = new Map<string, number>();
    const z = (name: string | undefined): number => {
      if (name === undefined) return random.normal();
      const known = shared.get(name) ?? random.normal();
      shared.set(name, known);
      return known;
    };
    return Math.min(
      ...numbers.map(({ value, budget }) =>
        budget.reduce((sum, line) => sum + line.uncertainty * z(line.shared), value),
      ),
    );
  }).sort((one, other) => one - other);
  return [0.025, 0.5, 0.975].map((share) => least[Math.round(share * least.length)] ?? NaN);
}

describe('the least of several measured currents', () => {
  it.each([
    ['one alone', [number(5, { own: 0.02 })]],
    ['two far apart', [number(5, { own: 0.02 }), number(6, { own: 0.02 })]],
    ['three that are equal', [5, 5, 5].map((value) => number(value, { own: 0.02 }))],
    ['two that are close', [number(5, { own: 0.02 }), number(5.01, { own: 0.04 })]],
    [
      'three measured with one load',
      [5, 5.01, 5.02].map((value) => number(value, { own: 0.01, load: 0.02 })),
    ],
    ['three that share all they have', [5, 5, 5.01].map((value) => number(value, { load: 0.02 }))],
    [
      'two measured with one load, a third with another',
      [
        number(5, { own: 0.01, load: 0.02 }),
        number(5.01, { own: 0.01, load: 0.02 }),
        number(5.005, { own: 0.01, other: 0.02 }),
      ],
    ],
  ])('%s: as by drawing lots', (_, numbers) => {
    const { low, value, high } = leastOf(numbers).estimate;
    const lots = drawn(numbers);
    const width = (lots[2] ?? NaN) - (lots[0] ?? NaN);
    for (const [index, end] of [low, value, high].entries()) {
      expect(Math.abs(end - (lots[index] ?? NaN))).toBeLessThan(0.02 * width);
    }
  });

  it('names the weakest only as surely as the errors that are not shared allow', () => {
    const own = leastOf([number(5, { own: 0.02 }), number(5.03, { own: 0.02 })]);
    expect(own.place).toBe(0);
    // Φ(0.03/(0.02·√2)), by tables.
    expect(own.probability).toBeCloseTo(0.8556, 4);
    const shared = leastOf([number(5, { own: 0.002, load: 0.02 }), number(5.03, { own: 0.002, load: 0.02 })]);
    expect(shared.probability).toBeGreaterThan(0.9999);
  });

  it('one whose limit was not met leaves open how much more it is, where it may be the least', () => {
    const tried: Taken = { ...number(4, { own: 0.01 }), bound: 'least' };
    const met = number(5, { own: 0.01 });
    expect(leastOf([tried, met])).toMatchObject({ estimate: { bound: 'least' }, probability: 0 });
    expect(leastOf([{ ...tried, value: 6, interval: [5.98, 6.02] }, met]).estimate.bound).toBeUndefined();
  });

  it('never rises when one more is added', () => {
    const any = fc
      .record({
        value: fc.double({ min: 1, max: 6, noNaN: true }),
        own: fc.double({ min: 0, max: 0.2, noNaN: true }),
      })
      .map(({ value, own }) => number(value, { own }));
    fc.assert(
      fc.property(fc.array(any, { minLength: 1, maxLength: 4 }), any, (numbers, more) => {
        const before = leastOf(numbers).estimate;
        const after = leastOf([...numbers, more]).estimate;
        expect(after.low).toBeLessThanOrEqual(before.low + 1e-9);
        expect(after.value).toBeLessThanOrEqual(before.value + 1e-9);
        expect(after.high).toBeLessThanOrEqual(before.high + 1e-9);
        expect(after.low).toBeLessThanOrEqual(after.value);
        expect(after.value).toBeLessThanOrEqual(after.high);
      }),
      { numRuns: 40 },
    );
  });

  it('of two equal ones without any error neither is below the other', () => {
    expect(probabilityBelow(number(5, { own: 0 }), number(5, { own: 0 }))).toBe(0.5);
    expect(probabilityBelow(number(4, { own: 0 }), number(5, { own: 0 }))).toBe(1);
  });
});
