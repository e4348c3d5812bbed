import { describe, expect, it } from 'vitest';

import {
  LinearCombination,
  type LinearCombinationFit,
  type LinearCombinationOutcome,
} from '../../src/statistics/linear-combination.js';
import { coverageFactor } from '../../src/statistics/student-t.js';
import fc from '../property.js';
import { normalScatter } from './normal-scatter.js';
import { relativeError } from './relative-error.js';

type Row = readonly [x: readonly number[], y: number];

function outcomeOf(unknowns: number, rows: readonly Row[]): LinearCombinationOutcome {
  const combination = new LinearCombination(unknowns);
  for (const [x, y] of rows) combination.add(x, y);
  return combination.solve();
}

function fitOf(unknowns: number, rows: readonly Row[]): LinearCombinationFit {
  const outcome = outcomeOf(unknowns, rows);
  if (outcome.kind !== 'determined') throw new Error(JSON.stringify(outcome));
  return outcome;
}

/** Ballast voltages of modules that share by their droops, and the load's current. */
function sharing(milliohms: readonly number[], seed: number, noise = 1e-3, count = 40): Row[] {
  const scatter = normalScatter(seed);
  return Array.from({ length: count }, (_, index) => {
    const currents = milliohms.map((_, module) => (1 + (index % (module + 2))) / 2 + 0.2 * module);
    const x = currents.map((amps, module) => (amps * (milliohms[module] ?? NaN)) / 1000);
    return [x, currents.reduce((sum, amps) => sum + amps, 0) + noise * scatter()] as const;
  });
}

const small = fc.integer({ min: -20, max: 20 });
const systems = fc.integer({ min: 1, max: 5 }).chain((unknowns) =>
  fc.tuple(
    fc.constant(unknowns),
    fc.array(fc.tuple(fc.array(small, { minLength: unknowns, maxLength: unknowns }), small), {
      minLength: unknowns + 1,
      maxLength: 25,
    }),
  ),
);

describe('the linear combination', () => {
  it('finds the coefficient of its example', () => {
    const fit = fitOf(1, [
      [[0.1], 2],
      [[0.2], 4],
      [[0.3], 6],
    ]);
    expect(fit.coefficients[0]).toBeCloseTo(20, 12);
    expect(fit).toMatchObject({ rows: 3, degreesOfFreedom: 2, condition: 1 });
  });

  it('leaves residuals at right angles to every unknown, and the sum of squares it says', () => {
    fc.assert(
      fc.property(systems, ([unknowns, rows]) => {
        const outcome = outcomeOf(unknowns, rows);
        if (outcome.kind !== 'determined') return;
        const residuals = rows.map(
          ([x, y]) => y - x.reduce((sum, of, k) => sum + of * (outcome.coefficients[k] ?? NaN), 0),
        );
        const tolerance = 1e-9 * outcome.condition * (1 + Math.hypot(...outcome.coefficients));
        for (let k = 0; k < unknowns; k += 1) {
          const along = rows.reduce((sum, [x], row) => sum + (x[k] ?? NaN) * (residuals[row] ?? NaN), 0);
          expect(Math.abs(along)).toBeLessThan(tolerance);
        }
        const sum = residuals.reduce((all, of) => all + of * of, 0);
        expect(Math.abs(sum - outcome.sumOfSquares)).toBeLessThan(tolerance);
      }),
      { numRuns: 300 },
    );
  });

  it('has a covariance that undoes the normal equations', () => {
    const rows = sharing([50, 50, 47], 1);
    const fit = fitOf(3, rows);
    const normal = [0, 1, 2].map((i) =>
      [0, 1, 2].map((j) => rows.reduce((sum, [x]) => sum + (x[i] ?? NaN) * (x[j] ?? NaN), 0)),
    );
    for (const i of [0, 1, 2]) {
      for (const j of [0, 1, 2]) {
        const sum = (fit.covariance[i] ?? []).reduce((all, of, k) => all + of * (normal[k]?.[j] ?? NaN), 0);
        expect(Math.abs(sum / fit.residualDeviation ** 2 - (i === j ? 1 : 0))).toBeLessThan(1e-9);
      }
      expect(
        relativeError(fit.uncertainties[i] ?? NaN, Math.sqrt(fit.covariance[i]?.[i] ?? NaN)),
      ).toBeLessThan(1e-12);
    }
  });

  it('finds the ballast of the wrong value', () => {
    const fit = fitOf(3, sharing([50, 68, 50], 2));
    const [first, second, third] = fit.coefficients.map((siemens) => 1000 / siemens);
    expect(first).toBeCloseTo(50, 0);
    expect(second).toBeCloseTo(68, 0);
    expect(third).toBeCloseTo(50, 0);
    const short = Math.abs((fit.coefficients[1] ?? NaN) - 20);
    expect(short).toBeGreaterThan(10 * coverageFactor(fit.degreesOfFreedom) * (fit.uncertainties[1] ?? NaN));
  });

  it('covers the true coefficients as often as it says', () => {
    const hits = [0, 0, 0];
    for (let seed = 1; seed <= 400; seed += 1) {
      const fit = fitOf(3, sharing([50, 68, 47], seed, 0.02));
      for (const [k, milliohms] of [50, 68, 47].entries()) {
        const off = Math.abs((fit.coefficients[k] ?? NaN) - 1000 / milliohms);
        if (off <= coverageFactor(fit.degreesOfFreedom) * (fit.uncertainties[k] ?? NaN))
          hits[k] = (hits[k] ?? 0) + 1;
      }
    }
    for (const of of hits) {
      expect(of / 400).toBeGreaterThanOrEqual(0.92);
      expect(of / 400).toBeLessThanOrEqual(0.98);
    }
  });

  it('gives the same whatever the order of the rows, and scales with the units', () => {
    const rows = sharing([50, 68, 47, 52], 3);
    const plain = fitOf(4, rows);
    const turned = fitOf(4, rows.toReversed());
    const inMillivolts = fitOf(
      4,
      rows.map(([x, y]) => [x.map((volts, k) => (k === 2 ? 1000 * volts : volts)), y]),
    );
    for (const k of [0, 1, 2, 3]) {
      const scale = k === 2 ? 1000 : 1;
      expect(relativeError(turned.coefficients[k] ?? NaN, plain.coefficients[k] ?? NaN)).toBeLessThan(1e-11);
      expect(
        relativeError(scale * (inMillivolts.coefficients[k] ?? NaN), plain.coefficients[k] ?? NaN),
      ).toBeLessThan(1e-11);
      expect(
        relativeError(scale * (inMillivolts.uncertainties[k] ?? NaN), plain.uncertainties[k] ?? NaN),
      ).toBeLessThan(1e-10);
    }
    expect(relativeError(inMillivolts.condition, plain.condition)).toBeLessThan(1e-10);
  });

  it('keeps the digits that normal equations lose', () => {
    // The two columns differ by 1e-6 only: their squares, by 1e-12, would leave four digits.
    const rows = Array.from({ length: 20 }, (_, index) => {
      const x = [1, 1 + 1e-6 * ((index % 5) - 2)];
      return [x, 3 * (x[0] ?? NaN) - 2 * (x[1] ?? NaN)] as const;
    });
    const fit = fitOf(2, rows);
    expect(fit.condition).toBeGreaterThan(1e6);
    expect(Math.abs((fit.coefficients[0] ?? NaN) - 3)).toBeLessThan(1e-8);
    expect(Math.abs((fit.coefficients[1] ?? NaN) + 2)).toBeLessThan(1e-8);
  });

  it('takes more rows after it was asked, and keeps none of them', () => {
    const rows = sharing([50, 68], 4, 1e-3, 30);
    const combination = new LinearCombination(2);
    const row = new Float64Array(2);
    for (const [x, y] of rows) {
      row.set(x);
      combination.add(row, y);
      combination.solve();
    }
    expect(combination.rows).toBe(30);
    expect(combination.solve()).toEqual(fitOf(2, rows));
  });

  it('takes sixteen unknowns and ten thousand rows', () => {
    const scatter = normalScatter(5);
    const truth = Array.from({ length: 16 }, (_, k) => k - 8);
    const combination = new LinearCombination(16);
    for (let row = 0; row < 10_000; row += 1) {
      const x = truth.map(() => scatter());
      combination.add(x, x.reduce((sum, of, k) => sum + of * (truth[k] ?? NaN), 0) + scatter());
    }
    const fit = combination.solve();
    if (fit.kind !== 'determined') throw new Error(fit.why);
    for (const [k, expected] of truth.entries()) {
      expect(Math.abs((fit.coefficients[k] ?? NaN) - expected)).toBeLessThan(
        5 * (fit.uncertainties[k] ?? NaN),
      );
    }
    expect(fit.residualDeviation).toBeCloseTo(1, 1);
    expect(fit.condition).toBeLessThan(1.2);
  });
});

describe('unknowns that the rows do not determine', () => {
  it('need one row more than there are unknowns', () => {
    expect(outcomeOf(2, [])).toEqual({ kind: 'undetermined', why: 'too-few-rows', rows: 0, needed: 3 });
    expect(
      outcomeOf(2, [
        [[1, 0], 1],
        [[0, 1], 1],
      ]),
    ).toEqual({ kind: 'undetermined', why: 'too-few-rows', rows: 2, needed: 3 });
  });

  it('are named when they only change together', () => {
    const rows = Array.from(
      { length: 9 },
      (_, index) => [[index + 1, index * index, 2 * index + 2], index] as const,
    );
    const outcome = outcomeOf(3, rows);
    expect(outcome).toMatchObject({ kind: 'undetermined', why: 'not-told-apart', unknowns: [0, 2], rows: 9 });
  });

  it('are named when they were never there', () => {
    expect(
      outcomeOf(2, [
        [[1, 0], 1],
        [[2, 0], 2],
        [[3, 0], 3],
      ]),
    ).toMatchObject({ why: 'not-told-apart', unknowns: [1], condition: Infinity });
  });

  it('are refused when they are no numbers, and nothing is changed by it', () => {
    const combination = new LinearCombination(2);
    combination.add([1, 2], 3);
    expect(() => {
      combination.add([1], 3);
    }).toThrow(/row 2 has 1 values for 2 unknowns/);
    expect(() => {
      combination.add([1, Number.NaN], 3);
    }).toThrow(/value 2 of row 2 is NaN/);
    expect(() => {
      combination.add([1, 2], Infinity);
    }).toThrow(/y of row 2 is Infinity/);
    expect(combination.rows).toBe(1);
    for (const unknowns of [0, 17, 1.5, Number.NaN]) {
      expect(() => new LinearCombination(unknowns)).toThrow(/unknowns, not 1 to 16/);
    }
  });
});
