import { describe, expect, it } from 'vitest';
import { type ClimbingBranch, climb } from '../../src/circuit/group-climb.js';

const branch = (voltage: number, limit: number, leaves: boolean): ClimbingBranch => ({
  curve: {
    openCircuitVoltage: voltage,
    droopResistance: 0.02,
    limit: { style: 'constant-current', current: limit },
  },
  resistance: 0,
  leaves,
});

describe('a load that climbs on a group', () => {
  // 15.20 V and 15.16 V through 20 mΩ each: while both give, the first gives 2 A more than the second.
  const currents = (
    first: boolean,
    second: boolean,
    loads: readonly number[],
  ): readonly (readonly number[])[] =>
    climb([branch(15.2, 3, first), branch(15.16, 6, second)], loads).map(({ branches }) =>
      branches.map(({ current }) => Number(current.toFixed(9))),
    );

  it('loses one that hiccups once it is pushed past its limit, and the other carries everything', () => {
    expect(currents(true, true, [3.9, 4.1])).toEqual([
      [2.95, 0.95],
      [0, 4.1],
    ]);
  });

  it('keeps one of constant current at its limit', () => {
    expect(currents(false, true, [3.9, 4.1, 8])).toEqual([
      [2.95, 0.95],
      [3, 1.1],
      [3, 5],
    ]);
  });

  it('has nothing left when the one that remains can not carry it all', () => {
    const [point] = climb([branch(15.2, 3, true), branch(15.16, 4, true)], [4.1]);
    expect(point?.left).toEqual([true, true]);
    expect(point?.busVoltage).toBe(0);
  });

  it('gets none back that has left, as long as the load only climbs', () => {
    const [, point] = climb([branch(15.2, 3, true), branch(15.16, 6, true)], [4.1, 4.1]);
    expect(point?.left).toEqual([true, false]);
  });
});
