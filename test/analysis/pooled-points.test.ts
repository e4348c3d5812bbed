import { describe, expect, it } from 'vitest';
import { evenly, mostLooks, pooled, taken } from '../../src/analysis/pooled-points.js';
import type { PointEvidence } from '../../src/analysis/point-evidence.js';
import fc from '../property.js';
import { lookOf } from './looks-of.js';

const volts = fc.array(fc.double({ min: 10, max: 20, noNaN: true }), { minLength: 1, maxLength: 5 });

function asOne(points: readonly PointEvidence[]): PointEvidence {
  return points.reduce(pooled);
}

describe('neighbours as one point', () => {
  it('have the number, mean, scatter and extremes of all their readings, and the mean of their times', () => {
    fc.assert(
      fc.property(fc.array(volts, { minLength: 2, maxLength: 12 }), (given) => {
        const looks = given.map((voltages, index) =>
          lookOf({ t: 10 * index, voltages, temperatures: voltages }),
        );
        const one = asOne(looks);
        const all = lookOf({ t: 0, voltages: given.flat(), temperatures: given.flat() });
        for (const of of ['moduleVoltage', 'loadVoltage', 'meterVoltage', 'temperature'] as const) {
          expect(one[of].count).toBe(all[of].count);
          expect(one[of].mean).toBeCloseTo(all[of].mean, 9);
          expect(one[of].sampleDeviation ?? 0).toBeCloseTo(all[of].sampleDeviation ?? 0, 7);
          expect([one[of].minimum, one[of].maximum]).toEqual([all[of].minimum, all[of].maximum]);
        }
        expect([one.looks, one.point]).toEqual([given.length, 1]);
        expect(one.t).toBeCloseTo(5 * (given.length - 1), 9);
      }),
    );
  });

  it('tell the lowest and the highest look among them, whatever the others were', () => {
    const temperatures = [30, 30.2, 34, 29.5, 30.1];
    const one = asOne(
      temperatures.map((celsius, t) => lookOf({ t, voltages: [15, 15], temperatures: [celsius, celsius] })),
    );
    expect(one.reach).toEqual({ moduleVoltage: [15, 15], temperature: [29.5, 34] });
    const unread = asOne([lookOf({ t: 0, voltages: [15] }), lookOf({ t: 1, voltages: [14] })]);
    expect(unread.reach).toEqual({ moduleVoltage: [14, 15], temperature: [NaN, NaN] });
    expect(lookOf({ t: 0, voltages: [15] }).reach).toBeUndefined();
  });
});

describe('looks that shall count the same', () => {
  const look = (t: number): PointEvidence => lookOf({ t, voltages: [t] });
  const group = (first: number, looks: number): PointEvidence =>
    asOne(Array.from({ length: looks }, (_, index) => look(first + index)));

  it('are themselves where none was pooled', () => {
    const looks = [look(1), look(2)];
    expect(evenly(looks)).toBe(looks);
    expect(evenly([])).toEqual([]);
  });

  it('are pooled to the largest, without a first that was kept for itself', () => {
    const points = [look(0), group(1, 4), group(5, 4), ...[9, 10, 11, 12, 13, 14].map(look)];
    expect([mostLooks(points), taken(points)]).toEqual([4, 15]);
    const even = evenly(points);
    expect(even.map(({ looks }) => looks)).toEqual([4, 4, 4, 2]);
    expect(even.map(({ moduleVoltage }) => moduleVoltage.mean)).toEqual([2.5, 6.5, 10.5, 13.5]);
    expect(even.map(({ t }) => t)).toEqual([2.5, 6.5, 10.5, 13.5]);
  });
});
