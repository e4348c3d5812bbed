import { describe, expect, it } from 'vitest';
import { RangeChoice } from '../../src/instrument/range-choice.js';
import type { Measurement } from '../../src/instrument/scpi-number.js';
import fc from '../property.js';

const ranges = [0.2, 2, 20, 200].map((upTo) => ({ upTo, select: [{ text: `RANG ${upTo}` }] }));
const value = (volts: number): Measurement => ({ kind: 'value', value: volts });

/** What is chosen after each of these was read, on the range chosen before. */
function chosenAfter(...read: readonly Measurement[]): number[] {
  const choice = new RangeChoice(ranges);
  return read.map((measurement) => {
    choice.took(measurement);
    return ranges[choice.chosen]?.upTo ?? NaN;
  });
}

describe('the range of the next reading', () => {
  it('is the widest before anything was read', () => {
    expect(new RangeChoice(ranges).chosen).toBe(3);
  });

  it('is the smallest that holds what was read last', () => {
    expect(chosenAfter(value(15), value(1.2), value(-0.1), value(0), value(-1.2))).toEqual([
      20, 2, 0.2, 0.2, 2,
    ]);
  });

  it('does not go to and fro with a value at its edge', () => {
    const atTheEdge = Array.from({ length: 10 }, (_, index) => value(index % 2 === 0 ? 1.85 : 1.7));
    expect(new Set(chosenAfter(value(15), ...atTheEdge))).toEqual(new Set([20]));
    expect(new Set(chosenAfter(value(1), ...atTheEdge))).toEqual(new Set([2]));
  });

  it('is wider before a rising value has left it', () => {
    expect(chosenAfter(value(1), value(1.89), value(1.91))).toEqual([2, 2, 20]);
  });

  it('is the next wider one for what is too much, and that is read again', () => {
    const choice = new RangeChoice(ranges);
    choice.took(value(1));
    expect([choice.took({ kind: 'overload' }), choice.chosen]).toEqual(['read-again', 2]);
    expect([choice.took(value(20.5)), choice.chosen]).toEqual(['read-again', 3]);
    expect([choice.took({ kind: 'overload' }), choice.chosen]).toEqual(['counts', 3]);
  });

  it('stays where what was read is no number', () => {
    expect(chosenAfter(value(1), { kind: 'not-a-number' })).toEqual([2, 2]);
  });

  it('never has a reading taken more often than there are ranges, and settles on a steady value', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: 0.001, max: 1000, noNaN: true }), { minLength: 1, maxLength: 6 }),
        fc.array(
          fc.oneof(fc.constant<Measurement>({ kind: 'overload' }), fc.double({ noNaN: true }).map(value)),
        ),
        fc.double({ min: -500, max: 500, noNaN: true }),
        (limits, before, steady) => {
          const choice = new RangeChoice(
            [...new Set(limits)].sort((one, other) => one - other).map((upTo) => ({ upTo, select: [] })),
          );
          for (const measurement of before) choice.took(measurement);
          let times = 1;
          while (choice.took(value(steady)) === 'read-again') times += 1;
          expect(times).toBeLessThanOrEqual(limits.length);
          const { chosen } = choice;
          choice.took(value(steady));
          choice.took(value(steady));
          const settled = choice.chosen;
          choice.took(value(steady));
          expect(choice.chosen).toBe(settled);
          expect(chosen).toBeLessThan(limits.length);
        },
      ),
    );
  });
});
