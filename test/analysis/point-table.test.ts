import { describe, expect, it } from 'vitest';
import { PointCollector } from '../../src/analysis/point-evidence.js';
import { PointTable } from '../../src/analysis/point-table.js';
import { pooled } from '../../src/analysis/pooled-points.js';
import { phases, type PointOutcome } from '../../src/record/journal-event.js';
import fc from '../property.js';
import { lookOf, saidBy } from './looks-of.js';

const number = fc.double({ min: -1e3, max: 1e3, noNaN: true });
const outcomes: readonly (PointOutcome | undefined)[] = ['held', 'dropped', 'measured', undefined];
const looks = fc.array(
  fc.record({
    t: number,
    voltages: fc.array(number, { maxLength: 4 }),
    temperatures: fc.array(number, { maxLength: 4 }),
    outcome: fc.constantFrom(...outcomes),
    phase: fc.constantFrom(...phases),
    set: fc.constantFrom({}, { current: 4 }, { voltage: 12 }),
    point: fc.nat(),
  }),
  { minLength: 1, maxLength: 300 },
);

/** With all that few points have: probes elsewhere, an ohmmeter, a module that it is about, single samples. */
function seldomOne() {
  const began = { event: 'point-began', step: 1, point: 7, phase: 'trace', set: {}, of: 'K2' } as const;
  const bench = { voltageFrom: 'load-terminals', leads: { resistance: 0.1, uncertainty: 0 } } as const;
  const { add, point } = ((collector) => ({
    add: collector.add.bind(collector),
    point: collector.point,
  }))(new PointCollector(bench, began, 3));
  const reading = { event: 'reading', step: 1, point: 7, sample: 1 } as const;
  add({ ...reading, of: 'meter', what: 'voltage', at: 'ballast-of-K2', value: 0.21 });
  add({ ...reading, of: 'meter', what: 'resistance', value: null, problem: 'overload' });
  add({ ...reading, of: 'load', what: 'voltage', value: 11.9 });
  add({ ...reading, of: 'load', what: 'current', value: 1 });
  return point;
}

describe('a table of points', () => {
  it('gives back every point as it was put there, to the last digit', () => {
    fc.assert(
      fc.property(looks, (given) => {
        const points = given.map(lookOf);
        const table = new PointTable();
        for (const point of points) table.add(point);
        expect(points.map((_, index) => saidBy(table.at(index)))).toEqual(points.map(saidBy));
      }),
      { numRuns: 40 },
    );
  });

  it('gives back what few points have, and a point that stands for several', () => {
    const several = pooled(
      lookOf({ t: 1, voltages: [15.1, 15.2], temperatures: [30, 31] }),
      lookOf({ t: 2, voltages: [15.3] }),
    );
    const points = [seldomOne(), several];
    const table = new PointTable();
    for (const point of points) table.add(point);
    expect([saidBy(table.at(0)), saidBy(table.at(1))]).toEqual(points.map(saidBy));
  });

  it('has a point elsewhere when it was moved, whole, and none that was cut off', () => {
    const table = new PointTable();
    const [one, other] = [lookOf({ t: 1, voltages: [15] }), seldomOne()];
    table.add(one);
    table.add(other);
    table.move(1, 0);
    expect(saidBy(table.at(0))).toEqual(saidBy(other));
    table.put(0, one);
    expect(saidBy(table.at(0))).toEqual(saidBy(one));
    table.cutOffAt(1);
    expect(table.length).toBe(1);
    table.add(one);
    expect(saidBy(table.at(1))).toEqual(saidBy(one));
  });
});
