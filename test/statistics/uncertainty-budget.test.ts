import { describe, expect, it } from 'vitest';

import { coverageFactor } from '../../src/statistics/student-t.js';
import {
  combine,
  expandedFor,
  interval,
  rectangular,
  type Contribution,
} from '../../src/statistics/uncertainty-budget.js';

const scatter: Contribution = {
  name: 'scatter of the readings',
  kind: 'A',
  uncertainty: 3,
  degreesOfFreedom: 9,
};
const gain: Contribution = {
  name: 'gain of the meter',
  kind: 'B',
  uncertainty: 4,
  degreesOfFreedom: Infinity,
};

describe('an uncertainty budget', () => {
  it('adds squares, and widens the interval for the few degrees of freedom it has', () => {
    const combined = combine([scatter, gain]);
    expect(combined.standardUncertainty).toBe(5);
    expect(combined.degreesOfFreedom).toBeCloseTo((625 / 81) * 9, 10);
    expect(combined.coverageFactor).toBe(coverageFactor(combined.degreesOfFreedom));
    expect(combined.expanded).toBe(5 * combined.coverageFactor);
    expect(combined.coverageFactor).toBeGreaterThan(1.96);
  });

  it('covers with the normal factor where all is of type B', () => {
    expect(combine([gain]).expanded).toBeCloseTo(4 * 1.959963984540054, 12);
  });

  it('does not depend on the order of its lines', () => {
    expect(combine([scatter, gain])).toEqual(combine([gain, scatter]));
  });

  it('expands nothing to nothing', () => {
    expect(combine([{ ...gain, uncertainty: 0 }])).toMatchObject({ standardUncertainty: 0, expanded: 0 });
  });

  it('is refused when it has no lines, or a line that says nothing', () => {
    expect(() => combine([])).toThrow(/there are no components/);
    expect(() => combine([{ ...gain, uncertainty: Number.NaN }])).toThrow(/NaN/);
  });
});

describe('an expanded uncertainty for another coverage', () => {
  it('is wider the more it is to cover, and nothing of what is known exactly', () => {
    const combined = combine([scatter, gain]);
    expect(expandedFor(combined, 0.95)).toBeCloseTo(combined.expanded, 12);
    // Many degrees of freedom: 3.29 standard uncertainties for 99.9 % of a normal distribution (from memory).
    expect(expandedFor(combine([gain]), 0.999)).toBeCloseTo(4 * 3.29, 1);
    expect(expandedFor(combine([{ ...gain, uncertainty: 0 }]), 0.999)).toBe(0);
  });
});

describe('a rectangular contribution', () => {
  it('is the half-width over the root of three', () => {
    expect(rectangular(Math.sqrt(3))).toBe(1);
    expect(rectangular(0)).toBe(0);
    expect(() => rectangular(-1)).toThrow(/-1/);
    expect(() => rectangular(Number.NaN)).toThrow(/NaN/);
  });
});

describe('an interval', () => {
  it('reaches as far as the expanded uncertainty to both sides', () => {
    expect(interval(10, { expanded: 0.5 })).toEqual([9.5, 10.5]);
  });
});
