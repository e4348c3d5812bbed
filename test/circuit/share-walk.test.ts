import { describe, expect, it } from 'vitest';
import { type ClimbingBranch, climb } from '../../src/circuit/group-climb.js';
import { knee } from '../../src/circuit/module-curve.js';
import type { DrawnBranch, PastLimit } from '../../src/circuit/drawn-branch.js';
import { ShareWalk, type WalkCorner } from '../../src/circuit/share-walk.js';
import fc from '../property.js';
import { amount, foldbacks, steadyLimits } from './any-circuit.js';

const sag = 0.05;

function walkOf(branches: readonly ClimbingBranch[]): ShareWalk {
  return new ShareWalk(drawnOf(branches), sag);
}

/** One draw of them. */
function drawnOf(branches: readonly ClimbingBranch[]): readonly DrawnBranch[] {
  const one = (value: number): Float64Array => Float64Array.of(value);
  return branches.map(({ curve, resistance, leaves }) => {
    const { limit } = curve;
    const past: PastLimit = leaves
      ? 'leaves'
      : limit.style === 'constant-current'
        ? 'holds'
        : limit.style === 'foldback'
          ? 'folds'
          : 'keeps-power';
    const beyond =
      limit.style === 'foldback'
        ? limit.shortCircuit
        : limit.style === 'constant-current'
          ? (limit.slope ?? Number.POSITIVE_INFINITY)
          : 0;
    return {
      voltage: one(curve.openCircuitVoltage),
      droop: one(curve.droopResistance),
      ballast: one(resistance),
      limit: one(limit.current),
      past,
      beyond: one(beyond),
      ceiling: one(Number.POSITIVE_INFINITY),
    };
  });
}

function withVoltage(branch: ClimbingBranch, factor: number): ClimbingBranch {
  const { curve } = branch;
  return { ...branch, curve: { ...curve, openCircuitVoltage: factor * curve.openCircuitVoltage } };
}

/** Draws of like groups as draws of one. */
function besideEachOther(draws: readonly (readonly DrawnBranch[])[]): readonly DrawnBranch[] {
  return (draws[0] ?? []).map((first, branch) => {
    const all = (of: Exclude<keyof DrawnBranch, 'past'>): Float64Array =>
      Float64Array.from(draws, (draw) => draw[branch]?.[of][0] ?? Number.NaN);
    return {
      past: first.past,
      voltage: all('voltage'),
      droop: all('droop'),
      ballast: all('ballast'),
      limit: all('limit'),
      beyond: all('beyond'),
      ceiling: all('ceiling'),
    };
  });
}

/** The currents and the bus at each load, and how far the group goes. */
function walked(branches: readonly ClimbingBranch[], loads: readonly number[]) {
  const width = branches.length + 1;
  const values = new Float64Array(loads.length * width);
  const walk = walkOf(branches);
  walk.currentsAt(0, loads, { values, draws: 1 });
  return {
    end: walk.climb(0),
    rows: loads.map((_, load) => [...values.subarray(load * width, (load + 1) * width)]),
  };
}

const curve = fc
  .record({
    voltage: amount(14.6, 15.4),
    droop: amount(0.001, 0.1),
    limit: fc.oneof(steadyLimits, foldbacks),
  })
  .map(({ voltage, droop, limit }) => ({
    openCircuitVoltage: voltage,
    droopResistance: droop,
    limit: { ...limit, current: Math.min(8, limit.current) },
  }));
const branch: fc.Arbitrary<ClimbingBranch> = fc.record({
  curve: curve.map((one) =>
    one.limit.style === 'foldback'
      ? {
          ...one,
          limit: { ...one.limit, shortCircuit: Math.min(0.9 * one.limit.current, one.limit.shortCircuit) },
        }
      : one,
  ),
  resistance: fc.oneof(fc.constant(0), amount(0.001, 0.3)),
  leaves: fc.boolean(),
});
/** One that leaves has no curve beyond. */
const branches = fc.array(branch, { minLength: 1, maxLength: 5 }).map((all) =>
  all.map((one): ClimbingBranch =>
    one.leaves
      ? {
          ...one,
          curve: { ...one.curve, limit: { style: 'constant-current', current: one.curve.limit.current } },
        }
      : one,
  ),
);

describe('walking the shares of a group once', () => {
  it('gives what solving it afresh at each load gives', () => {
    fc.assert(
      fc.property(branches, fc.array(amount(0, 1), { minLength: 1, maxLength: 12 }), (group, shares) => {
        const { end } = walked(group, []);
        const loads = shares.map((share) => share * end.end).sort((one, other) => one - other);
        const points = climb(group, loads);
        const { rows } = walked(group, loads);
        for (const [index, load] of loads.entries()) {
          const point = points[index];
          const row = rows[index] ?? [];
          // Within rounding of a corner either side of it is right; a jump there is no disagreement.
          if (nearCorner(group, load)) continue;
          const expected = [
            ...(point?.branches ?? []).map(({ current }) => current),
            point?.busVoltage ?? NaN,
          ];
          for (const [place, value] of expected.entries()) expect(row[place]).toBeCloseTo(value, 6);
          expect(row.slice(0, -1).reduce((sum, current) => sum + current, 0)).toBeCloseTo(load, 6);
        }
      }),
      { numRuns: 1000 },
    );
  });

  it('gives each of many draws what it gives that one alone, whichever went before', () => {
    const factors = fc.array(amount(0.97, 1.03), { minLength: 2, maxLength: 4 });
    fc.assert(
      fc.property(branches, factors, (group, factors) => {
        const draws = factors.map((factor) => group.map((branch) => withVoltage(branch, factor)));
        const walk = new ShareWalk(besideEachOther(draws.map(drawnOf)), sag);
        const loads = [0, 0.5, 1, 2, 4, 8, 16];
        const values = new Float64Array(loads.length * (group.length + 1) * draws.length);
        for (const draw of draws.keys()) walk.currentsAt(draw, loads, { values, draws: draws.length });
        for (const [draw, alone] of draws.entries()) {
          const own = values.filter((_, place) => place % draws.length === draw);
          expect([...own]).toEqual(walked(alone, loads).rows.flat());
          expect(walk.climb(draw)).toEqual(walked(alone, []).end);
        }
      }),
    );
  });

  it('says at which load the first comes to its limit, and holds nothing beyond the end', () => {
    fc.assert(
      fc.property(branches, (group) => {
        const { end } = walked(group, []);
        const at = (load: number) => climb(group, [load])[0];
        if (end.first >= 0 && end.firstLoad > 1e-3) {
          const one = group[end.first];
          const before = at(end.firstLoad * (1 - 1e-9));
          const turn = one === undefined ? undefined : knee(one.curve);
          expect(before?.branches[end.first]?.current).toBeCloseTo(turn?.current ?? NaN, 5);
        }
        const { rows } = walked(group, [end.end * (1 + 1e-9) + 1e-9]);
        expect(rows[0]?.every(Number.isNaN)).toBe(true);
      }),
      { numRuns: 1000 },
    );
  });
});

function nearCorner(group: readonly ClimbingBranch[], load: number): boolean {
  const corners: WalkCorner[] = [];
  walkOf(group).climb(0, (corner) => corners.push(corner));
  return corners.some((corner) => Math.abs(corner.load - load) <= 1e-7 * (1 + load));
}
