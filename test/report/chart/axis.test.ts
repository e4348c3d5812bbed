import { describe, expect, it } from 'vitest';
import { axisOf, domainOf } from '../../../src/report/chart/axis.js';
import fc from '../../property.js';

describe('an axis', () => {
  it.each([
    ['current', 0, 5, 'Load (A)', ['0', '1', '2', '3', '4', '5']],
    ['current', 0, 0.25, 'Load (mA)', ['0', '50', '100', '150', '200', '250']],
    ['current', 0, 0.7, 'Load (A)', ['0', '0.1', '0.2', '0.3', '0.4', '0.5', '0.6', '0.7']],
    ['ratio', 0.2, 0.5, 'Load (%)', ['20', '25', '30', '35', '40', '45', '50']],
    ['time', 0, 600, 'Load (min)', ['0', '2', '4', '6', '8', '10']],
    ['voltage', -3, 3, 'Load (V)', ['−3', '−2', '−1', '0', '1', '2', '3']],
  ] as const)('of a %s from %d to %d is %s with round ticks', (dimension, from, to, label, texts) => {
    const axis = axisOf({ label: 'Load', dimension, from, to }, [0, 400], 6);
    expect(axis.label).toBe(label);
    expect(axis.ticks.map(({ text }) => text)).toEqual(texts);
  });

  it('puts its ends where they belong', () => {
    const axis = axisOf({ label: 'Load', dimension: 'current', from: 1, to: 3 }, [100, 300], 5);
    expect([axis.at(1), axis.at(2), axis.at(3)]).toEqual([100, 200, 300]);
  });

  it('holds every value of its domain, and is never of no length', () => {
    const values = fc.array(fc.double({ min: -1e4, max: 1e4, noNaN: true }), { minLength: 1 });
    fc.assert(
      fc.property(values, (all) => {
        const { from, to } = domainOf(all);
        expect(to).toBeGreaterThan(from);
        expect(Math.min(...all)).toBeGreaterThanOrEqual(from);
        expect(Math.max(...all)).toBeLessThanOrEqual(to);
      }),
    );
  });

  it('of nothing at all goes from 0 to 1', () => {
    expect(domainOf([NaN, Infinity])).toEqual({ from: 0, to: 1 });
  });
});
