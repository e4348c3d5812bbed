import { describe, expect, it } from 'vitest';
import { analyse } from '../../src/analysis/analyse.js';
import { dropoutBracket } from '../../src/analysis/dropout.js';
import type { Finding } from '../../src/analysis/finding.js';
import type { Phase, PointOutcome } from '../../src/record/journal-event.js';
import { evenly, evidenceOf, headerOf, type Point, ramp, type Step } from './evidence-of.js';

/** A load that takes 1 % more than it is told, and 20 mA besides, as its read-back shows. */
const flowing = (set: number): number => set * 1.01 + 0.02;

function probe(set: number, outcome: PointOutcome, phase: Phase = 'halve', current = flowing(set)): Point {
  const held = outcome === 'held';
  return {
    set,
    phase,
    outcome,
    samples: [held ? { meter: 15.21 - 0.018 * current, current } : { meter: 1.2, current: 0.31 }],
  };
}

const search: Step = {
  kind: 'dropout-search',
  points: [
    probe(4, 'held', 'start'),
    probe(4.8, 'held', 'climb'),
    probe(5.6, 'dropped', 'climb'),
    probe(4.8, 'held', 'return'),
    probe(5.2, 'held'),
    probe(5.4, 'dropped'),
    probe(5.2, 'held', 'return'),
    probe(5.3, 'dropped'),
  ],
};

function dropoutOf(steps: readonly Step[], header = headerOf()): Finding | undefined {
  return analyse(evidenceOf(steps, header)).find((finding) => finding.name === 'dropout-current');
}

describe('the bracket of the dropout', () => {
  it('is in currents that flowed, not in set-points; the dropped one by the line of the held ones', () => {
    expect(dropoutBracket(evidenceOf([search]))).toEqual({
      step: 1,
      held: expect.closeTo(flowing(5.2), 9) as number,
      dropped: expect.closeTo(flowing(5.3), 9) as number,
      fall: expect.closeTo(15.21 - 0.018 * flowing(5.2) - 1.2, 9) as number,
      heldAbove: undefined,
    });
  });

  it('takes the nearest reading’s distance where two set-points only were held', () => {
    const points = [
      probe(4, 'held', 'start', 4.05),
      probe(5, 'held', 'climb', 5.1),
      probe(6, 'dropped', 'climb'),
    ];
    const bracket = dropoutBracket(evidenceOf([{ kind: 'dropout-search', points }]));
    expect([bracket?.held, bracket?.dropped]).toEqual([expect.closeTo(5.1, 9), expect.closeTo(6.1, 9)]);
  });

  it('tells that the limit came down, where what was held before dropped later', () => {
    const points = [...(search.points ?? []), probe(5.2, 'dropped', 'return'), probe(5.1, 'held', 'return')];
    const evidence = evidenceOf([{ kind: 'dropout-search', points }]);
    expect(dropoutBracket(evidence)).toMatchObject({
      heldAbove: expect.closeTo(0, 9) as number,
      held: expect.closeTo(flowing(5.1), 9) as number,
    });
    expect(dropoutOf([{ kind: 'dropout-search', points }])?.note).toContain('the limit came down meanwhile');
  });

  it('is not turned round by the scatter of single readings when it is narrow', () => {
    const noise = [0.001, -0.001, 0.0015, -0.0005, 0.002];
    const sets = [4, 4.4, 4.8, 5.2, 5.201];
    const points = [
      ...sets.map((set, index) => probe(set, 'held', 'halve', set + (noise[index] ?? 0))),
      probe(5.202, 'dropped'),
    ];
    const found = dropoutOf([{ kind: 'dropout-search', points }]);
    expect(found?.value).toBeCloseTo(5.2015, 2);
    expect(found?.budget[0]?.uncertainty).toBeCloseTo(0.0005 / Math.sqrt(3), 5);
  });

  it('comes from a ramp that ended early where no search was made', () => {
    const points = [...ramp(evenly(0, 3, 16), () => 15), probe(3.2, 'dropped', 'ramp')];
    const found = dropoutOf([{ kind: 'load-ramp', points }]);
    expect(found?.value).toBeCloseTo(3.1, 9);
    expect(found?.step).toBe(1);
  });

  it('takes what an earlier step held where the search itself held nothing below', () => {
    const found = dropoutOf([
      { kind: 'load-ramp', points: ramp(evenly(0, 4, 21), (current) => 15.21 - 0.018 * current) },
      { kind: 'dropout-search', points: [probe(4.4, 'dropped', 'start')] },
    ]);
    expect(found?.value).toBeCloseTo(4.2, 9);
    expect(found?.note).toBe('held 4.000 A, dropped 4.400 A');
    expect(found?.step).toBe(2);
  });

  it('is not there when everything was held, when nothing was, and when the search was cut off', () => {
    const held = (search.points ?? []).filter((point) => point.outcome === 'held');
    expect(dropoutOf([{ kind: 'dropout-search', points: held }])).toBeUndefined();
    expect(dropoutOf([{ kind: 'dropout-search', points: [probe(4, 'dropped', 'start')] }])).toBeUndefined();
    const torn = [...held, { ...probe(5.3, 'dropped'), outcome: null }];
    expect(dropoutOf([{ kind: 'dropout-search', points: torn }])).toBeUndefined();
  });

  it('does not count the wait for recovery as a dropout', () => {
    const waiting = { ...probe(0, 'dropped', 'recovery'), set: 4.5 };
    const held = (search.points ?? []).filter((point) => point.outcome === 'held');
    expect(dropoutOf([{ kind: 'dropout-search', points: [...held, waiting] }])).toBeUndefined();
  });
});

describe('the dropout current', () => {
  const load = {
    current: { ofReading: 0.002 * Math.sqrt(3), fixed: 0.01 * Math.sqrt(3), resolution: 0.001 },
  };
  const found = dropoutOf([search], headerOf({ load }));
  const middle = (flowing(5.2) + flowing(5.3)) / 2;

  it('is the middle of the bracket and tells both its ends', () => {
    expect(found?.value).toBeCloseTo(middle, 9);
    expect(found?.note).toBe('held 5.272 A, dropped 5.373 A');
  });

  it('is as uncertain as the bracket is wide, over √12, together with what the load promises', () => {
    const lines = Object.fromEntries(found?.budget.map((line) => [line.name, line.uncertainty]) ?? []);
    expect(lines).toEqual({
      'between the held and the dropped current': expect.closeTo(0.101 / Math.sqrt(12), 9) as number,
      'load current, gain': expect.closeTo(0.002 * middle, 9) as number,
      'load current, offset': expect.closeTo(0.01, 9) as number,
      'load current, resolution': expect.closeTo(0.001 / Math.sqrt(12), 9) as number,
    });
  });

  it('lies with its lower bound below what was held, where nothing but the bracket is uncertain', () => {
    // 1.96/√3 of the half-width: the 95 % interval of a combined value is a little wider than the bracket.
    const [low, high] = dropoutOf([search])?.interval ?? [NaN, NaN];
    expect(low).toBeLessThan(flowing(5.2));
    expect(low).toBeGreaterThan(flowing(5.2) - 0.01);
    expect(high).toBeGreaterThan(flowing(5.3));
  });
});
