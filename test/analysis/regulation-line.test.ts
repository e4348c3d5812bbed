import { describe, expect, it } from 'vitest';
import norris from '../../fixtures/reference/nist-strd-norris.json' with { type: 'json' };
import { analyse } from '../../src/analysis/analyse.js';
import type { CurvePoint } from '../../src/analysis/curve.js';
import { curveSeen } from '../../src/analysis/curve-seen.js';
import { findingNamed } from '../../src/analysis/finding.js';
import { lineAt, regulationLine } from '../../src/analysis/regulation-line.js';
import { residualsSeen } from '../../src/analysis/residuals-seen.js';
import { randomFrom } from '../../src/statistics/random.js';
import { relativeError } from '../statistics/relative-error.js';
import { evenly, evidenceOf, headerOf, type Point, ramp } from './evidence-of.js';

// Source: NIST Statistical Reference Datasets, linear regression, Norris: data and certified values. The band is
// ŷ ± t(0.975; 34)·s·√(1/n + (x − x̄)²/Σ(x − x̄)²) (JCGM 100:2008, H.3.4 and G.3), recomputed from the data with
// mpmath to 40 digits, t by its inverted incomplete beta function: 2.032244509317719.
describe("the 95 % band of a line, on NIST's Norris data", () => {
  const points = norris.x.map((x, index): CurvePoint => ({
    step: 1,
    phase: 'ramp',
    set: x,
    current: x,
    voltage: norris.y[index] ?? NaN,
    deviation: undefined,
    readings: 1,
  }));
  const line = regulationLine(headerOf(), points);
  if (line === undefined) throw new Error('no line');

  it.each([
    [0, -0.262323073774029, 0.473143578327563],
    [500, 500.796085936453, 0.307889464919625],
    [1000, 1001.85449494668, 0.589225293484811],
  ])('at %s is what mpmath gives', (x, value, half) => {
    const there = lineAt(line, x);
    expect(relativeError(there.value, value)).toBeLessThan(1e-11);
    expect(relativeError(there.expanded, half)).toBeLessThan(1e-11);
  });

  it('has the certified uncertainty of the intercept at no load', () => {
    expect(relativeError(lineAt(line, 0).uncertainty, norris.certified.sd[0] ?? NaN)).toBeLessThan(1e-12);
    expect(relativeError(line.scatter, norris.certified.residual_sd)).toBeLessThan(1e-12);
  });
});

/** Readings that scatter by a millivolt, five at a point; with faultless instruments. */
function scattered(currents: readonly number[], seed = 3): readonly Point[] {
  const random = randomFrom(seed);
  return currents.map((current) => ({
    set: current,
    samples: Array.from({ length: 5 }, () => ({
      meter: 15.21 - 0.018 * current + 0.001 * random.normal(),
      current,
    })),
  }));
}

describe('what the line of a chart and the findings say', () => {
  it('is the same interval, where nothing but scatter is uncertain', () => {
    const evidence = evidenceOf([{ kind: 'load-ramp', points: scattered(evenly(0, 4, 21)) }]);
    const { line } = curveSeen(evidence);
    const found = findingNamed(analyse(evidence), 'open-circuit-voltage');
    const interval = found?.interval ?? undefined;
    if (line === undefined || found === undefined || interval === undefined) throw new Error('neither');
    const { value, expanded } = lineAt(line, 0);
    expect(value).toBe(found.value);
    expect(value - expanded).toBeCloseTo(interval[0], 12);
    expect(value + expanded).toBeCloseTo(interval[1], 12);
  });

  it('rests on the same points: none beyond the knee, none that swing, none of a search', () => {
    const bent = (current: number): number => 15 - 0.01 * current - Math.max(0, current - 5);
    const evidence = evidenceOf([
      { kind: 'load-ramp', points: ramp(evenly(0, 5.5, 56), bent) },
      { kind: 'dropout-search', points: ramp([4.2], bent).map((point) => ({ ...point, phase: 'climb' })) },
    ]);
    const { regulated, knee, beyondKnee, cold, line } = curveSeen(evidence);
    expect(knee?.breakpoint).toBeCloseTo(5, 6);
    expect(Math.max(...regulated.map(({ current }) => current))).toBeLessThan(5);
    expect(regulated.every(({ step }) => step === 1)).toBe(true);
    expect(cold.some(({ step }) => step === 2)).toBe(true);
    expect(beyondKnee[0]?.current).toBe(knee?.breakpoint);
    expect(beyondKnee[1]?.voltage).toBeCloseTo(bent(5.5), 6);
    expect(line?.fit.points).toBe(regulated.length);
  });

  it('is nothing where there is nothing to lay a line through', () => {
    expect(curveSeen(evidenceOf([]))).toMatchObject({ held: [], regulated: [], beyondKnee: [] });
    expect(curveSeen(evidenceOf([])).line).toBeUndefined();
    const still = ramp([4, 4, 4, 4, 4], () => 15);
    expect(curveSeen(evidenceOf([{ kind: 'load-ramp', points: still }])).line).toBeUndefined();
  });
});

describe('what points lie off the line', () => {
  it('is expected to be t·s/√n of single readings, and is so 19 times of 20', () => {
    let within = 0;
    let all = 0;
    let expectedOfAll = 0;
    for (let seed = 1; seed <= 40; seed += 1) {
      const evidence = evidenceOf([{ kind: 'load-ramp', points: scattered(evenly(0, 4, 21), seed) }]);
      const seen = residualsSeen(headerOf(), curveSeen(evidence));
      // 21 points of five readings leave four degrees of freedom each.
      expect(seen?.degreesOfFreedom).toBe(84);
      for (const { off, expected } of seen?.residuals ?? []) {
        all += 1;
        if (Math.abs(off) <= expected) within += 1;
      }
      expectedOfAll += (seen?.residuals[0]?.expected ?? NaN) / 40;
    }
    // t(0.975; 84) is 1.98861 (scipy.stats.t.ppf); the pooled deviations are 1 mV within a hundredth or so on average.
    expect(expectedOfAll / ((1.98861 * 0.001) / Math.sqrt(5))).toBeGreaterThan(0.96);
    expect(expectedOfAll / ((1.98861 * 0.001) / Math.sqrt(5))).toBeLessThan(1.04);
    // A little more than 95 %, as the line follows its own points.
    expect(within / all).toBeGreaterThan(0.94);
    expect(within / all).toBeLessThan(0.985);
  });

  it('adds up to nothing, and is expected to be what the last digit hides where each has one reading', () => {
    const header = headerOf({ meter: { voltage: { ofReading: 0, fixed: 0, resolution: 0.01 } } });
    const coarse = (current: number): number => Math.round((15.21 - 0.018 * current) * 100) / 100;
    const evidence = evidenceOf([{ kind: 'load-ramp', points: ramp(evenly(0, 4, 21), coarse) }], header);
    const seen = residualsSeen(header, curveSeen(evidence));
    expect(seen?.degreesOfFreedom).toBeUndefined();
    expect((seen?.residuals ?? []).reduce((sum, { off }) => sum + off, 0)).toBeCloseTo(0, 10);
    // 1.96 · (10 mV / 2) / √3
    expect(seen?.residuals[3]?.expected).toBeCloseTo((1.959964 * 0.005) / Math.sqrt(3), 8);
  });
});
