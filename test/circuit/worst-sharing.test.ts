import { describe, expect, it } from 'vitest';
import { type UnlimitedBranch, branchCurrents } from '../../src/circuit/shared-load.js';
import {
  type BallastedGroup,
  type GroupModule,
  rangesOf,
  worstDissipation,
  worstSharing,
} from '../../src/circuit/worst-sharing.js';
import fc from '../property.js';

/** Found by halves and not by Millman: the bus at which the branches give just what the load takes. */
function byHalves(branches: readonly UnlimitedBranch[], load: number): readonly number[] {
  const given = (bus: number) =>
    branches.map(({ voltage, resistance }) => Math.max(0, (voltage - bus) / resistance));
  let [low, high] = [-1e6, Math.max(...branches.map(({ voltage }) => voltage))];
  for (let turn = 0; turn < 200; turn += 1) {
    const middle = (low + high) / 2;
    if (given(middle).reduce((sum, current) => sum + current, 0) > load) low = middle;
    else high = middle;
  }
  return given((low + high) / 2);
}

/** Each end of each range with each end of every other. */
function corners(group: BallastedGroup): readonly (readonly UnlimitedBranch[])[] {
  return rangesOf(group).reduce<readonly (readonly UnlimitedBranch[])[]>(
    (before, range) =>
      before.flatMap((branches) =>
        range.voltage.flatMap((voltage) =>
          range.resistance.map((resistance) => [...branches, { voltage, resistance }]),
        ),
      ),
    [[]],
  );
}

function imbalance(currents: readonly number[], load: number): number {
  return ((Math.max(...currents) - Math.min(...currents)) * currents.length) / load;
}

const number = (min: number, max: number) => fc.double({ min, max, noNaN: true });
const module: fc.Arbitrary<GroupModule> = fc.record({
  openCircuit: fc.record({ value: number(14.9, 15.1), expanded: number(0, 0.03) }),
  droop: fc.record({ value: number(0, 0.1), expanded: number(0, 0.03) }),
});
const groups: fc.Arbitrary<BallastedGroup> = fc.record({
  modules: fc.array(module, { minLength: 2, maxLength: 4 }),
  load: number(1, 16),
  ballast: number(0.005, 1),
  tolerance: number(0, 0.2),
});

const exactly = (value: number): GroupModule['droop'] => ({ value, expanded: 0 });

describe('the worst sharing', () => {
  it('is that of the worst of all corners, wherever every module carries something', () => {
    fc.assert(
      fc.property(groups, (group) => {
        const { load } = group;
        const brute = corners(group).map((branches) => byHalves(branches, load));
        const worst = Math.max(...brute.map((currents) => imbalance(currents, load)));
        const found = worstSharing(group);
        const idle = brute.some((currents) => Math.min(...currents) <= 0);
        const count = group.modules.length;
        if (idle) expect(found.imbalance).toBeGreaterThan((count / (count - 1)) * (1 - 1e-9));
        else expect(found.imbalance).toBeCloseTo(worst, 6);
      }),
      { numRuns: 300 },
    );
  });

  it('is never outdone by anything between the corners, nor is its heat', () => {
    const inside = fc.array(fc.tuple(number(0, 1), number(0, 1), number(0, 1)), {
      minLength: 4,
      maxLength: 4,
    });
    fc.assert(
      fc.property(groups, inside, (group, places) => {
        const { modules, load, ballast, tolerance } = group;
        const branches = modules.map(({ openCircuit, droop }, index) => {
          const [atVoltage = 0, atDroop = 0, atBallast = 0] = places[index] ?? [];
          const within = (value: number, expanded: number, at: number) => value + expanded * (2 * at - 1);
          const own = ballast * within(1, tolerance, atBallast);
          return {
            voltage: within(openCircuit.value, openCircuit.expanded, atVoltage),
            own,
            resistance: Math.max(0, within(droop.value, droop.expanded, atDroop)) + own,
          };
        });
        const found = worstSharing(group);
        // Where a module can idle no exact worst is promised, only that it is too bad.
        fc.pre(found.imbalance < 1);
        const currents = byHalves(branches, load);
        expect(imbalance(currents, load)).toBeLessThanOrEqual(found.imbalance * (1 + 1e-9) + 1e-9);
        const heat = Math.max(...branches.map(({ own }, index) => (currents[index] ?? 0) ** 2 * own));
        expect(heat).toBeLessThanOrEqual(worstDissipation(group) * (1 + 1e-9));
      }),
      { numRuns: 300 },
    );
  });

  it('is reached by the heat of a ballast whose own tolerance stands at its upper end', () => {
    // Two equal modules without droop: 50 mΩ ± 10 % beside 55 mΩ, so 2 A each while both are at the top.
    const stiff = { openCircuit: exactly(15), droop: exactly(0) };
    const group = { modules: [stiff, stiff], load: 4, ballast: 0.05, tolerance: 0.1 };
    expect(worstDissipation(group)).toBeCloseTo(2 ** 2 * 0.055, 12);
  });

  it('is endless where two stiff outputs meet without any resistance', () => {
    const stiff = { openCircuit: exactly(15), droop: exactly(0) };
    const group = { modules: [stiff, stiff], load: 4, ballast: 0, tolerance: 0.05 };
    expect(worstSharing(group).imbalance).toBe(Number.POSITIVE_INFINITY);
  });
});

describe('currents that feed a common load', () => {
  it('add up to the load and never flow backwards', () => {
    const branch = fc.record({ voltage: number(0, 20), resistance: number(0.001, 1) });
    fc.assert(
      fc.property(fc.array(branch, { minLength: 1, maxLength: 8 }), number(0.1, 50), (branches, load) => {
        const currents = branchCurrents(branches, load);
        expect(currents.reduce((sum, current) => sum + current, 0)).toBeCloseTo(load, 6);
        expect(Math.min(...currents)).toBeGreaterThanOrEqual(0);
        byHalves(branches, load).forEach((current, index) => {
          expect(currents[index]).toBeCloseTo(current, 5);
        });
      }),
    );
  });
});
