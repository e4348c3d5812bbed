import { describe, expect, it } from 'vitest';
import { type BallastWanted, imbalanceByTolerance, smallestBallast } from '../../src/circuit/ballast.js';
import { preferredFrom, preferredSeries } from '../../src/circuit/preferred-values.js';
import { type GroupModule, worstSharing } from '../../src/circuit/worst-sharing.js';
import { UnfitDataError } from '../../src/statistics/unfit-data-error.js';
import fc from '../property.js';

function brick(voltage: number, droop: number, expanded = { voltage: 0, droop: 0 }): GroupModule {
  return {
    openCircuit: { value: voltage, expanded: expanded.voltage },
    droop: { value: droop, expanded: expanded.droop },
  };
}

const nursery: BallastWanted = {
  modules: [
    brick(15.21, 0.018, { voltage: 0.004, droop: 0.001 }),
    brick(15.19, 0.021, { voltage: 0.004, droop: 0.001 }),
  ],
  load: 6,
  imbalance: 0.2,
  tolerance: 0.05,
  series: 'E12',
};

function found(wanted: BallastWanted) {
  const outcome = smallestBallast(wanted);
  if (outcome.kind !== 'found') throw new Error(outcome.kind);
  return outcome;
}

describe('the smallest ballast', () => {
  it('for two bricks of the nursery, worked by hand', () => {
    // Worst: 15.214 V through 17 mΩ + 0.95·R against 15.186 V through 22 mΩ + 1.05·R, whose currents lie
    // (2·28 mV + 6 A·(R2 − R1))/(R1 + R2) apart: 146 mV/239 mΩ = 0.611 A at 100 mΩ, which is more than a
    // fifth of 3 A; 158 mV/279 mΩ = 0.566 A at 120 mΩ.
    const ballast = found(nursery);
    expect(ballast.value).toBe(0.12);
    expect(ballast.imbalance).toBeCloseTo(0.158 / 0.279 / 3, 9);
    expect(ballast.mostCurrent).toBeCloseTo(3 + 0.158 / 0.279 / 2, 9);
    expect(ballast.voltageCost).toBeCloseTo(0.36, 12);
    // The strong one with a ballast of 126 mΩ: 3 A ± (28 mV + 3 A·(148 − 143) mΩ)/(143 + 148) mΩ.
    expect(ballast.dissipation).toBeCloseTo((3 + 0.043 / 0.291) ** 2 * 0.126, 9);
  });

  it('keeps what was wanted, and no smaller preferred value does', () => {
    const number = (min: number, max: number) => fc.double({ min, max, noNaN: true });
    const module = fc
      .tuple(number(15, 15.1), number(0, 0.05), number(0, 0.01))
      .map(([voltage, droop, expanded]) => brick(voltage, droop, { voltage: expanded, droop: 0.001 }));
    const wanted: fc.Arbitrary<BallastWanted & { readonly load: number }> = fc.record({
      modules: fc.array(module, { minLength: 2, maxLength: 4 }),
      load: number(2, 16),
      imbalance: number(0.05, 0.9),
      tolerance: number(0, 0.1),
      series: fc.constantFrom(...preferredSeries),
    });
    fc.assert(
      fc.property(wanted, (one) => {
        const outcome = smallestBallast(one);
        const sharing = (ballast: number) => worstSharing({ ...one, ballast }).imbalance;
        if (outcome.kind === 'unneeded') expect(sharing(0)).toBeLessThanOrEqual(one.imbalance);
        if (outcome.kind === 'too-costly') expect(outcome.imbalance).toBeGreaterThan(one.imbalance);
        if (outcome.kind === 'too-coarse') {
          expect(sharing(1e6)).toBeGreaterThan(one.imbalance);
          expect(sharing(1e6)).toBeCloseTo(outcome.imbalance, 4);
        }
        if (outcome.kind !== 'found') return;
        expect(sharing(outcome.value)).toBeLessThanOrEqual(one.imbalance);
        const smaller = [...preferredFrom(0.001, outcome.value * 0.99, one.series)];
        expect(smaller.filter((value) => sharing(value) <= one.imbalance)).toEqual([]);
      }),
    );
  });

  it('is not needed where the modules share well enough without', () => {
    const alike = [brick(15.2, 0.1), brick(15.2, 0.1)];
    expect(smallestBallast({ ...nursery, modules: alike })).toEqual({ kind: 'unneeded', imbalance: 0 });
  });

  it('does not exist where the tolerance alone unbalances them by more', () => {
    expect(smallestBallast({ ...nursery, tolerance: 0.2 })).toEqual({
      kind: 'too-coarse',
      imbalance: imbalanceByTolerance(0.2, 2),
    });
  });

  it('does not exist where it would cost too much voltage, and the largest tried is told', () => {
    // Half a volt apart, a tenth apart at 1 A each: 5 Ω and 5 V of 15 V.
    const apart = [brick(15.5, 0), brick(15, 0)];
    const outcome = smallestBallast({ ...nursery, modules: apart, load: 2, imbalance: 0.1, tolerance: 0 });
    expect(outcome).toMatchObject({ kind: 'too-costly', largest: 1.5 });
    expect(outcome.imbalance).toBeCloseTo(0.5 / 1.5, 9);
    const more = smallestBallast({
      ...nursery,
      modules: apart,
      load: 2,
      imbalance: 0.1,
      tolerance: 0,
      mostCost: 0.4,
    });
    expect(more).toMatchObject({ kind: 'found', value: 5.6 });
  });

  it.each<[string, Partial<BallastWanted>]>([
    ['one module', { modules: [brick(15, 0)] }],
    ['no load', { load: 0 }],
    ['an imbalance of nothing', { imbalance: 0 }],
    ['an imbalance at which one idles', { imbalance: 1 }],
    ['a tolerance that leaves no resistor', { tolerance: 1 }],
    ['no voltage', { modules: [brick(15, 0), brick(Number.NaN, 0)] }],
    ['a cost of everything', { mostCost: 1 }],
  ])('is refused for %s', (_, change) => {
    expect(() => smallestBallast({ ...nursery, ...change })).toThrow(UnfitDataError);
  });
});
