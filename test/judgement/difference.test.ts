import { describe, expect, it } from 'vitest';
import { bothMeasured, differenceOf, type Measured } from '../../src/judgement/difference.js';
import fc from '../property.js';

function found(value: number, expanded: number | null, more: Partial<Measured> = {}): Measured {
  return {
    name: 'open-circuit-voltage',
    value,
    dimension: 'voltage',
    standardUncertainty: expanded === null ? null : expanded / 2,
    interval: expanded === null ? null : [value - expanded, value + expanded],
    note: '',
    ...more,
  };
}

describe('the difference of a finding between two records', () => {
  // By hand: 10.05 V ± 0.04 V less 10.00 V ± 0.03 V is 0.05 V; U = √(0.03² + 0.04²) = 0.05 V; E_n = 1.
  it('has the uncertainty of both, and is measured by it', () => {
    const difference = differenceOf(found(10, 0.03), found(10.05, 0.04));
    expect(difference.value).toBeCloseTo(0.05, 12);
    expect(difference.standardUncertainty).toBeCloseTo(0.025, 12);
    expect(difference.expanded).toBeCloseTo(0.05, 12);
    expect(difference.normalizedError).toBeCloseTo(1, 12);
    expect(difference.share).toBeCloseTo(0.005, 12);
    expect(difference.dimension).toBe('voltage');
  });

  // By hand: droop of 18 mΩ ± 0.25 mΩ that has become 36 mΩ ± 0.6 mΩ: U = 0.65 mΩ, E_n = 18/0.65 = 27.69.
  it('of a droop that doubled is many times its uncertainty', () => {
    const { expanded, normalizedError, share } = differenceOf(found(18, 0.25), found(36, 0.6));
    expect(expanded).toBeCloseTo(0.65, 12);
    expect(normalizedError).toBeCloseTo(27.6923, 4);
    expect(share).toBeCloseTo(1, 12);
  });

  it('is not measured by an uncertainty that nobody knows, or that is none', () => {
    expect(differenceOf(found(4, null), found(4, null))).toMatchObject({
      expanded: null,
      standardUncertainty: null,
      normalizedError: null,
    });
    expect(differenceOf(found(4, 0), found(4, 0))).toMatchObject({ expanded: 0, normalizedError: null });
    expect(differenceOf(found(4, 0), found(5, 0)).normalizedError).toBeNull();
    // E_n of ISO 13528 needs both expanded uncertainties: half of one would make it too large.
    for (const [before, after] of [
      [found(4, null), found(5, 0.5)],
      [found(4, 0.5), found(5, null)],
    ] as const) {
      expect(differenceOf(before, after)).toMatchObject({
        value: 1,
        expanded: null,
        standardUncertainty: null,
        normalizedError: null,
      });
    }
  });

  it('has no E_n where either side is a bound only', () => {
    const least = found(6, 0.1, { bound: 'least' });
    expect(differenceOf(found(5, 0.1), least).normalizedError).toBeNull();
    expect(differenceOf(least, found(5, 0.1)).normalizedError).toBeNull();
  });

  it('is no share of an earlier value that may be nothing', () => {
    expect(differenceOf(found(0, 0), found(1, 0.1)).share).toBeNull();
    expect(differenceOf(found(0.01, 0.02), found(1, 0.1)).share).toBeNull();
    expect(differenceOf(found(-2, 0.02), found(-3, 0.1)).share).toBeCloseTo(-0.5, 12);
  });

  it('of temperatures is in kelvins', () => {
    const warm = found(40, 1, { dimension: 'temperature' });
    expect(differenceOf(warm, { ...warm, value: 45 }).dimension).toBe('temperature-difference');
  });

  it('turns its sign when the records change places, and nothing else; E_n is never NaN', () => {
    const values = fc.double({ min: -1e3, max: 1e3, noNaN: true });
    const widths = fc.double({ min: 0, max: 10, noNaN: true });
    fc.assert(
      fc.property(values, widths, values, widths, (one, oneU, other, otherU) => {
        const there = differenceOf(found(one, oneU), found(other, otherU));
        const back = differenceOf(found(other, otherU), found(one, oneU));
        expect(there.value + back.value).toBe(0);
        expect(there.expanded).toBe(back.expanded);
        expect(there.normalizedError).not.toBeNaN();
      }),
    );
  });

  it('is there for quantities of one kind only', () => {
    const volts = found(4, 0.1);
    expect(bothMeasured(volts, volts)).toEqual([volts, volts]);
    expect(bothMeasured(volts, { ...volts, dimension: 'current' })).toBeUndefined();
    expect(bothMeasured(volts, { ...volts, value: 'four', dimension: null })).toBeUndefined();
  });
});
