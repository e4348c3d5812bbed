import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { analyse } from '../../src/analysis/analyse.js';
import type { CurvePoint } from '../../src/analysis/curve.js';
import type { Finding } from '../../src/analysis/finding.js';
import { findEdge } from '../../src/analysis/steadiness.js';
import { randomFrom } from '../../src/statistics/random.js';
import { randomCase } from '../whole/random-case.js';
import { runQuietly } from '../whole/run-quietly.js';
import { evenly, evidenceOf, headerOf, type Point } from './evidence-of.js';

/** Points at 0, 1, 2 … A with these spreads, in multiples of 1 mV. */
function pointsOf(...deviations: readonly number[]): readonly CurvePoint[] {
  return deviations.map((deviation, current) => ({
    step: 1,
    phase: 'ramp',
    set: current,
    current,
    voltage: 15,
    deviation: deviation / 1000,
    readings: 5,
  }));
}

const none = undefined;

describe('the edge of steadiness', () => {
  it.each([
    ['a calm module', [1, 1.3, 0.8, 1, 1.2, 0.9, 1, 1.1], none],
    ['an output that swings from 5 A on', [1, 1, 1, 1, 1, 60, 80, 70], [4, 5]],
    ['one disturbed reading on the way', [1, 1, 1, 90, 1, 1, 1, 1], none],
    ['two of them', [1, 90, 1, 1, 90, 1, 1, 1], none],
    ['one just below the highest current', [1, 1, 1, 1, 1, 1, 90, 1], none],
    ['one disturbed reading at no load and a swing above', [90, 1, 1, 1, 60, 80, 70, 60], [3, 4]],
    ['one disturbed reading at 1 A and a swing above', [1, 90, 1, 1, 60, 80, 70, 60], [3, 4]],
    ['a swing that one point happens to miss', [1, 1, 1, 1, 1, 60, 1.2, 80, 70, 60], [4, 5]],
    ['one point at the highest current that scatters by chance', [1, 1.1, 0.9, 1, 1, 0.8, 1, 4.5], none],
    ['a swing at the highest current only', [1, 1, 1, 1, 1, 1, 1, 60], [6, 7]],
    ['a swing over most of the currents', [1, 1, 1, 60, 60, 70, 60, 80, 90, 60, 70, 60], [2, 3]],
    ['restlessness at light load only', [60, 60, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1], none],
    ['the same, and a swing above', [60, 60, 1, 1, 1, 1, 1, 1, 1, 60, 60, 60], [8, 9]],
    ['a swing that begins half hidden', [1, 1, 1, 1, 2.7, 60, 80, 70], [3, 5]],
    ['a spread that grows to twice', [1, 1, 1, 1, 2, 2, 2, 2], none],
  ] as const)('%s', (_, deviations, expected) => {
    const edge = findEdge(pointsOf(...deviations), 0);
    expect(edge && [edge.steady, edge.unsteady]).toEqual(expected);
  });

  it('is not hidden by the many points that a search takes near the limit', () => {
    const deviationAt = (current: number): number => (current < 2 ? 0.001 : 0.08);
    const points = [...evenly(0, 4, 21), ...evenly(4, 5.3, 30)].map((current) => ({
      step: 1,
      phase: 'ramp' as const,
      set: current,
      current,
      voltage: 15,
      readings: 5,
      deviation: deviationAt(current),
    }));
    const edge = findEdge(points, 0);
    expect([edge?.steady, edge?.unsteady]).toEqual([expect.closeTo(1.8, 9), expect.closeTo(2, 9)]);
  });

  it('is not made by the last digit: a quiet meter flips it now and then', () => {
    const flips = pointsOf(0, 0, 0, 0, 0, 0, 0.45, 0.45, 0.45);
    expect(findEdge(flips, 0.001 / Math.sqrt(12))).toBeUndefined();
  });

  it.each([2, 3, 5, 20])('is seldom made by chance, with %i readings at a point', (readings) => {
    const random = randomFrom(readings);
    const ramps = 1000;
    let alarms = 0;
    for (let index = 0; index < ramps; index += 1) {
      const deviations = Array.from({ length: 21 }, () => deviationOf(readings, random.normal));
      const points = pointsOf(...deviations).map((point) => ({ ...point, readings }));
      if (findEdge(points, 0) !== undefined) alarms += 1;
    }
    expect(alarms / ramps).toBeLessThan(0.01);
  });

  it('is not looked for in one point, or in points of a single reading', () => {
    expect(findEdge(pointsOf(1), 0)).toBeUndefined();
    expect(findEdge([], 0)).toBeUndefined();
    const single = pointsOf(1, 1, 1, 60, 60).map((point) => ({
      ...point,
      deviation: undefined,
      readings: 1,
    }));
    expect(findEdge(single, 0)).toBeUndefined();
  });
});

function deviationOf(readings: number, normal: () => number): number {
  const values = Array.from({ length: readings }, normal);
  const mean = values.reduce((sum, value) => sum + value, 0) / readings;
  return Math.sqrt(values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (readings - 1));
}

describe('the current above which the output swings', () => {
  const swinging = (current: number): Point => {
    const swing = current < 3.1 ? 0.001 : 0.1;
    return {
      set: current,
      samples: [-1, 1, -1, 1].map((sign) => ({ meter: 15 + sign * swing, current })),
    };
  };

  it('is the middle of the edge, as uncertain as the edge is wide, and names both its ends', () => {
    const load = { current: { ofReading: 0.002 * Math.sqrt(3), fixed: 0.01 * Math.sqrt(3) } };
    const evidence = evidenceOf(
      [{ kind: 'load-ramp', points: evenly(0, 4, 21).map(swinging) }],
      headerOf({ load }),
    );
    const found = analyse(evidence).find((finding) => finding.name === 'unsteady-above-current');
    expect(found).toMatchObject({
      value: expect.closeTo(3.1, 9) as number,
      note: 'steady at 3.000 A, swinging at 3.200 A',
      step: 1,
    });
    // Rectangular: half the width over √3.
    const expected = Math.hypot(0.1 / Math.sqrt(3), 0.002 * 3.1, 0.01);
    expect(found?.standardUncertainty).toBeCloseTo(expected, 9);
  });
});

describe('a module on the simulated bench that oscillates', () => {
  let runs: string;
  const found = new Map<number, readonly Finding[]>();

  beforeAll(async () => {
    runs = mkdtempSync(join(tmpdir(), 'railproof-steadiness-'));
    const { bench, module, truth } = randomCase(3);
    for (const unsteadyAbove of [1, 1.5, 2, 2.5]) {
      const { simulation } = bench;
      if (simulation === undefined) throw new Error('the bench is not simulated');
      const swings = { ...bench, simulation: { ...simulation, modules: [{ ...truth, unsteadyAbove }] } };
      found.set(unsteadyAbove, (await runQuietly('real-limit', swings, module, runs)).findings);
    }
  });

  afterAll(() => {
    rmSync(runs, { recursive: true, force: true });
  });

  it.each([1, 1.5, 2, 2.5])('from %f A on is found to, and is called usable up to there', (unsteadyAbove) => {
    const findings = found.get(unsteadyAbove) ?? [];
    const [low, high] = findings.find(({ name }) => name === 'unsteady-above-current')?.interval ?? [
      NaN,
      NaN,
    ];
    expect(low).toBeLessThan(unsteadyAbove);
    expect(high).toBeGreaterThan(unsteadyAbove);
    expect(findings.find(({ name }) => name === 'usable-current')?.interval).toEqual([low, high]);
  });
});
