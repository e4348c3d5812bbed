import { describe, expect, it } from 'vitest';
import { type Branch, groupPoints } from '../../src/circuit/parallel-group.js';
import { branchCurrents } from '../../src/circuit/shared-load.js';
import {
  behindDrop,
  currentAt,
  currentsAt,
  endVoltageOf,
  inGroup,
  inStack,
  limitOf,
  lineOf,
  openVoltageOf,
  voltageOf,
} from '../../src/circuit/supply-line.js';
import { UnfitDataError } from '../../src/statistics/unfit-data-error.js';
import fc from '../property.js';

const number = (min: number, max: number) => fc.double({ min, max, noNaN: true });
const parts = fc.record({ voltage: number(14.5, 15.5), resistance: number(0.01, 0.3), limit: number(1, 6) });
const several = fc.tuple(parts, parts, parts);

describe('the line of a supply', () => {
  it('falls from its open voltage to its limit', () => {
    const line = lineOf({ voltage: 15, resistance: 0.1, limit: 4 });
    expect(openVoltageOf(line)).toBe(15);
    expect(voltageOf(line, 2)).toBeCloseTo(14.8, 12);
    expect(endVoltageOf(line)).toBeCloseTo(14.6, 12);
    expect(limitOf(line)).toBe(4);
  });

  it('is not known beyond its limit', () => {
    expect(() => voltageOf(lineOf({ voltage: 15, resistance: 0.1, limit: 4 }), 4.01)).toThrow(UnfitDataError);
    expect(() => voltageOf(lineOf({ voltage: 15, resistance: 0.1, limit: 4 }), Number.NaN)).toThrow(
      UnfitDataError,
    );
  });

  it('gives nothing into a higher bus, its limit into a lower one, and what lies between', () => {
    const line = lineOf({ voltage: 15, resistance: 0.1, limit: 4 });
    expect([16, 15, 14.9, 14.6, 10].map((bus) => currentAt(line, bus))).toEqual([
      0,
      0,
      expect.closeTo(1, 9) as number,
      expect.closeTo(4, 9) as number,
      4,
    ]);
  });

  it('ends where its resistance has taken all of its voltage', () => {
    expect(limitOf(lineOf({ voltage: 12, resistance: 6, limit: 5 }))).toBe(2);
  });

  it('may have no resistance at all', () => {
    const stiff = lineOf({ voltage: 15, resistance: 0, limit: 4 });
    expect(voltageOf(stiff, 3)).toBe(15);
    const both = inGroup([stiff, stiff]);
    expect(limitOf(both)).toBe(8);
    expect(voltageOf(both, 8)).toBe(15);
  });
});

describe('a stack', () => {
  it('adds voltages and ends with the least limit', () => {
    fc.assert(
      fc.property(several, number(0, 1), ([a, b, c], share) => {
        const lines = [lineOf(a), lineOf(b), lineOf(c)] as const;
        const stack = inStack(lines);
        expect(limitOf(stack)).toBe(Math.min(a.limit, b.limit, c.limit));
        const current = share * limitOf(stack);
        expect(voltageOf(stack, current)).toBeCloseTo(
          [a, b, c].reduce((sum, { voltage, resistance }) => sum + voltage - resistance * current, 0),
          9,
        );
      }),
    );
  });

  it('of groups has the corners of each', () => {
    const group = inGroup([
      lineOf({ voltage: 15.2, resistance: 0.1, limit: 4 }),
      lineOf({ voltage: 15, resistance: 0.1, limit: 4 }),
    ]);
    const stack = inStack([group, lineOf({ voltage: 12, resistance: 0.2, limit: 7 })]);
    // The second of the group comes in at 2 A; the first comes to its limit at 14.8 V, where the second gives 2 A.
    expect(stack.corners).toEqual([
      { voltage: expect.closeTo(27.2, 9) as number, current: 0 },
      { voltage: expect.closeTo(26.6, 9) as number, current: expect.closeTo(2, 9) as number },
      { voltage: expect.closeTo(25.6, 9) as number, current: expect.closeTo(6, 9) as number },
    ]);
  });
});

describe('a group', () => {
  it('shares as branches without limits do', () => {
    fc.assert(
      fc.property(several, number(0.01, 1), ([a, b, c], share) => {
        const lines = [lineOf(a), lineOf(b), lineOf(c)] as const;
        const group = inGroup(lines);
        const load = share * limitOf(group);
        const currents = currentsAt(lines, voltageOf(group, load));
        branchCurrents([a, b, c], load).forEach((current, index) => {
          expect(currents[index]).toBeCloseTo(current, 6);
        });
      }),
    );
  });

  it('rests where Kirchhoff says, limits and all, and ends where the first comes to its own', () => {
    const branch = ({ voltage, resistance, limit }: Parameters<typeof lineOf>[0]): Branch => ({
      source: {
        kind: 'module',
        curve: {
          openCircuitVoltage: voltage,
          droopResistance: resistance,
          limit: { style: 'constant-current', current: limit },
        },
      },
      resistance: 0,
    });
    fc.assert(
      fc.property(fc.tuple(parts, parts), number(0.01, 0.999), ([a, b], share) => {
        const group = inGroup([lineOf(a), lineOf(b)]);
        const current = share * limitOf(group);
        const [point] = groupPoints([branch(a), branch(b)], {
          kind: 'current',
          current,
          leastVoltage: 1,
          leads: 0,
        });
        expect(point?.busVoltage).toBeCloseTo(voltageOf(group, current), 6);
        const [ofA = 0, ofB = 0] = currentsAt([lineOf(a), lineOf(b)], endVoltageOf(group));
        expect(Math.min(Math.abs(ofA - a.limit), Math.abs(ofB - b.limit))).toBeLessThan(1e-9);
      }),
    );
  });
});

it('a diode takes as much of the voltage at every current', () => {
  const line = behindDrop(lineOf({ voltage: 15, resistance: 0.1, limit: 4 }), 0.5);
  expect(openVoltageOf(line)).toBe(14.5);
  expect(voltageOf(line, 4)).toBeCloseTo(14.1, 12);
});
