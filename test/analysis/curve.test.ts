import { describe, expect, it } from 'vitest';
import { heldPoints, stepsOf } from '../../src/analysis/curve.js';
import { evidenceOf, type Point } from './evidence-of.js';

const at = (current: number, rest: Partial<Point> = {}): Point => ({
  set: current,
  samples: [{ meter: 15 - current, current }],
  ...rest,
});

describe('the points of the curve that a module held', () => {
  it('are in the order of their currents, whatever the order they were taken in', () => {
    const evidence = evidenceOf([
      { kind: 'load-ramp', points: [at(0), at(2), at(1)] },
      { kind: 'dropout-search', points: [at(1.5)] },
    ]);
    expect(heldPoints(evidence.steps).map(({ step, current, voltage }) => [step, current, voltage])).toEqual([
      [1, 0, 15],
      [1, 1, 14],
      [2, 1.5, 13.5],
      [1, 2, 13],
    ]);
  });

  it('are those that were held to their end, under a set current, and could be read', () => {
    const points = [
      at(1, { outcome: 'dropped' }),
      at(1, { outcome: 'measured', phase: 'overload' }),
      at(1, { outcome: null }),
      at(1, { phase: 'recovery' }),
      { samples: at(1).samples },
      at(1, { samples: [{ meter: null, current: 1 }] }),
      at(1, { samples: [{ meter: 14, current: null }] }),
      at(1, { samples: [] }),
    ];
    expect(heldPoints(evidenceOf([{ kind: 'load-ramp', points }]).steps)).toEqual([]);
  });

  it('have the deviation of single readings, where there is more than one', () => {
    const twice = [
      { meter: 15, current: 1 },
      { meter: 15.2, current: 1 },
    ];
    const [one, two] = heldPoints(
      evidenceOf([{ kind: 'load-ramp', points: [at(0), at(1, { samples: twice })] }]).steps,
    );
    expect([one?.deviation, one?.readings]).toEqual([undefined, 1]);
    expect(two?.deviation).toBeCloseTo(0.2 / Math.SQRT2, 12);
  });
});

describe('the steps of a kind', () => {
  it('are all of that kind, in order', () => {
    const evidence = evidenceOf([{ kind: 'load-ramp' }, { kind: 'wait' }, { kind: 'load-ramp' }]);
    expect(stepsOf(evidence, 'load-ramp').map(({ step }) => step)).toEqual([1, 3]);
  });
});
