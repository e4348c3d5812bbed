import { describe, expect, it } from 'vitest';

import { fitLine, predictLine } from '../../src/statistics/line-fit.js';
import { fitSettling } from '../../src/statistics/settling-fit.js';
import { normalScatter } from './normal-scatter.js';
import { relativeError } from './relative-error.js';

const times = Array.from({ length: 60 }, (_, index) => 10 * index);

/** How often each outcome comes in 300 trials with a scatter of 0.1. */
function outcomes(curve: (time: number) => number, t: readonly number[] = times): Record<string, number> {
  const counts: Record<string, number> = {};
  for (let seed = 1; seed <= 300; seed += 1) {
    const scatter = normalScatter(seed);
    const outcome = fitSettling(
      t,
      t.map((time) => curve(time) + 0.1 * scatter()),
    );
    const name = outcome.kind === 'no-settling' ? outcome.why : outcome.kind;
    counts[name] = (counts[name] ?? 0) + 1;
  }
  return counts;
}

describe('data that do not settle', () => {
  it('have settled already when they are flat within their scatter', () => {
    expect(outcomes(() => 56)['already-settled']).toBeGreaterThan(285);
    expect(outcomes(() => 56, [0, 1, 2, 3, 4])['already-settled']).toBeGreaterThan(285);
  });

  it('have settled already when the readings are steps of the display', () => {
    const outcome = fitSettling(
      times,
      times.map((_, index) => (index % 7 === 3 ? 56.1 : 56)),
    );
    expect(outcome).toMatchObject({ kind: 'already-settled', points: 60, degreesOfFreedom: 59 });
    expect(outcome).toHaveProperty('mean', expect.closeTo(56 + (0.1 * 9) / 60, 12));
    expect(fitSettling(times, new Float64Array(60).fill(0.1))).toMatchObject({
      kind: 'already-settled',
      mean: 0.1,
      uncertainty: 0,
    });
  });

  it('are straight when they go on and on, and a bend is seen by chance only at 5 %', () => {
    const counts = outcomes((time) => 21 + time / 100);
    expect(counts['straight']).toBeGreaterThan(255);
    expect(counts['settling'] ?? 0).toBeLessThan(30);
    expect(Object.keys(counts)).not.toContain('already-settled');
  });

  it('are straight when cut so short that no bend shows', () => {
    const counts = outcomes((time) => 21 + 35 * -Math.expm1(-time / 60_000));
    expect(counts['straight']).toBeGreaterThan(240);
  });

  it('tell the line that they are on, as the straight-line fit does', () => {
    const scatter = normalScatter(9);
    const y = times.map((time) => 21 + time / 100 + 0.1 * scatter());
    const line = fitLine(times, y);
    const outcome = fitSettling(times, y);
    if (outcome.kind !== 'no-settling' || outcome.why !== 'straight') throw new Error(outcome.kind);
    const last = predictLine(line, 590);
    expect(relativeError(outcome.slope, line.slope)).toBeLessThan(1e-12);
    expect(relativeError(outcome.slopeUncertainty, line.slopeUncertainty)).toBeLessThan(1e-12);
    expect(relativeError(outcome.last, last.value)).toBeLessThan(1e-12);
    expect(relativeError(outcome.lastUncertainty, last.uncertainty)).toBeLessThan(1e-12);
    expect(outcome.points).toBe(60);
  });

  it('are straight to the last digit without any scatter', () => {
    expect(fitSettling([0, 1, 2, 3, 4], [0.1, 0.3, 0.5, 0.7, 0.9])).toMatchObject({ why: 'straight' });
  });

  it('accelerate when they grow faster and faster, up or down', () => {
    expect(outcomes((time) => 21 + Math.exp(time / 200))).toEqual({ accelerating: 300 });
    expect(outcomes((time) => 21 - (time / 300) ** 2)['accelerating']).toBeGreaterThan(290);
    expect(fitSettling([0, 1, 2, 3, 4], [1, 2, 4, 8, 16])).toMatchObject({ why: 'accelerating' });
  });

  it('turn when they come back, early or late', () => {
    expect(outcomes((time) => 40 - ((time - 300) / 100) ** 2)).toEqual({ turning: 300 });
    expect(outcomes((time) => 40 - ((time - 400) / 100) ** 2)).toEqual({ turning: 300 });
    expect(outcomes((time) => 40 + ((time - 220) / 100) ** 2)).toEqual({ turning: 300 });
  });

  it('are sudden when all changed before the second reading, or their time constant is far shorter', () => {
    expect(fitSettling([0, 1, 2, 3, 4], [0, 1, 1, 1, 1])).toEqual({
      kind: 'no-settling',
      why: 'sudden',
      points: 5,
    });
    const counts = outcomes((time) => (time === 0 ? 21 : 56));
    expect((counts['sudden'] ?? 0) + (counts['settling'] ?? 0)).toBe(300);
    expect(counts['sudden']).toBeGreaterThan(100);
  });

  it.each([
    ['no reading', [], []],
    ['three readings', [0, 1, 2], [1, 2, 3]],
    ['readings at two times', [0, 0, 1, 1, 1], [1, 2, 3, 4, 5]],
    ['readings at one time', [5, 5, 5, 5], [1, 2, 3, 4]],
  ])('are too few: %s', (_, t, y) => {
    expect(fitSettling(t, y)).toEqual({ kind: 'no-settling', why: 'too-few-points', points: t.length });
  });
});
