import { describe, expect, it } from 'vitest';
import { type LoadLaw, currentDrawn } from '../../src/circuit/load-law.js';
import { type ModuleCurve, currentAtVoltage } from '../../src/circuit/module-curve.js';
import { operatingPoints } from '../../src/circuit/operating-point.js';
import { type Branch, type GroupPoint, groupPoints } from '../../src/circuit/parallel-group.js';
import fc from '../property.js';
import { amount, curvesWith, foldbacks, laws, steadyLimits } from './any-circuit.js';

const brick: ModuleCurve = {
  openCircuitVoltage: 15,
  droopResistance: 0.05,
  limit: { style: 'constant-current', current: 5 },
};
const through = (resistance: number, curve: ModuleCurve = brick): Branch => ({
  source: { kind: 'module', curve },
  resistance,
});
const high = (volts: number): ModuleCurve => ({ ...brick, openCircuitVoltage: 15 + volts });
const off = (resistance: number): Branch => ({ source: { kind: 'off' }, resistance });
const sinks = (current: number): LoadLaw => ({ kind: 'current', current, leastVoltage: 1, leads: 0.05 });
const currentsOf = (point: GroupPoint | undefined): readonly number[] =>
  point?.branches.map(({ current }) => current) ?? [];

function expectClose(found: readonly number[], expected: readonly number[]): void {
  expect(found).toHaveLength(expected.length);
  for (const [index, value] of expected.entries()) expect(found[index]).toBeCloseTo(value, 9);
}

describe('a parallel group', () => {
  // Worked by hand: 50 mΩ of droop and 50 mΩ of ballast, so 0.1 Ω each.
  it.each<[string, readonly Branch[], LoadLaw, number, readonly number[]]>([
    ['shares evenly when its modules are alike', [through(0.05), through(0.05)], sinks(4), 14.8, [2, 2]],
    [
      'leans on the module that stands higher',
      [through(0.05, high(0.1)), through(0.05)],
      sinks(4),
      14.85,
      [2.5, 1.5],
    ],
    [
      'leaves a low module without current while the bus is above it',
      [through(0.05, high(0.5)), through(0.05)],
      sinks(4),
      15.1,
      [4, 0],
    ],
    [
      'holds its load past one module’s limit while another can take the rest',
      [through(0, high(0.5)), through(0)],
      sinks(8),
      14.85,
      [5, 3],
    ],
    [
      'gives no more than the sum of its limits',
      [through(0.05), through(0.05)],
      sinks(12),
      (1.6 * 10) / 12,
      [5, 5],
    ],
    ['goes on with one module off', [through(0.05), off(0.05)], sinks(4), 14.6, [4, 0]],
    ['gives nothing with all of them off', [off(0.05), off(0.05)], sinks(4), 0, [0, 0]],
    [
      'stands at its highest module when nothing is drawn',
      [through(0.05), through(0.05, high(0.2))],
      { kind: 'open' },
      15.2,
      [0, 0],
    ],
    [
      'feeds a resistor',
      [through(0.05), through(0.05)],
      { kind: 'resistance', resistance: 3, leads: 0.7 },
      14.8,
      [2, 2],
    ],
    [
      'meets a held voltage',
      [through(0.05), through(0.05)],
      { kind: 'voltage', voltage: 14, leads: 0 },
      14,
      [5, 5],
    ],
    [
      'meets a dead short',
      [through(0.05), through(0.05)],
      { kind: 'voltage', voltage: 0, leads: 0 },
      0,
      [5, 5],
    ],
  ])('%s', (_, group, law, bus, currents) => {
    const [point, ...others] = groupPoints(group, law);
    expect(others).toEqual([]);
    expectClose([point?.busVoltage ?? NaN], [bus]);
    expectClose(currentsOf(point), currents);
  });

  it('stands before its ballast at the terminals of each module, and at the bus where none flows', () => {
    const [point] = groupPoints([through(0.05), through(0.02, high(-1)), off(0.05)], sinks(2));
    expectClose(point?.branches.map(({ voltage }) => voltage) ?? [], [14.9, 14.8, 14.8]);
  });

  it('drives current back into a module that lets it, and into no other', () => {
    const sinking: ModuleCurve = { ...brick, reverseResistance: 0.05 };
    const [point] = groupPoints([through(0.05, high(0.4)), through(0.05, sinking)], { kind: 'open' });
    expectClose(currentsOf(point), [2, -2]);
    expectClose(point?.branches.map(({ voltage }) => voltage) ?? [], [15.3, 15.1]);
  });

  it('is held down by a module that takes back any current at its own voltage', () => {
    const clamp: ModuleCurve = { ...brick, droopResistance: 0, reverseResistance: 0 };
    const [point] = groupPoints([through(0.05, high(0.4)), through(0, clamp)], sinks(1));
    expect(point?.busVoltage).toBe(15);
    expectClose(currentsOf(point), [4, -3]);
  });

  it('of stiff modules without ballast lets the higher one hog up to its limit, and the group still holds', () => {
    const stiff: ModuleCurve = { ...brick, droopResistance: 0 };
    const higher = { ...stiff, openCircuitVoltage: 15.01 };
    expect(currentsOf(groupPoints([through(0, stiff), through(0, higher)], sinks(4))[0])).toEqual([0, 4]);
    expect(currentsOf(groupPoints([through(0, stiff), through(0, higher)], sinks(7))[0])).toEqual([2, 5]);
  });

  it('of stiff modules of the very same voltage shares by what each can give', () => {
    const stiff: ModuleCurve = { ...brick, droopResistance: 0 };
    const small: ModuleCurve = { ...stiff, limit: { style: 'constant-current', current: 3 } };
    const [point] = groupPoints([through(0, stiff), through(0, small)], sinks(4));
    expect(point?.busVoltage).toBe(15);
    expectClose(currentsOf(point), [2.5, 1.5]);
  });

  it('behind ballast shares by the ballast where its modules have no droop', () => {
    const stiff: ModuleCurve = { ...brick, droopResistance: 0 };
    const [point] = groupPoints([through(0.05, stiff), through(0.1, stiff)], sinks(3));
    expectClose(currentsOf(point), [2, 1]);
  });

  it('behind ballast does so too where the droop is lost in the last digit of the voltage', () => {
    const stiff: ModuleCurve = { ...brick, droopResistance: 1e-20 };
    expectClose(currentsOf(groupPoints([through(0.05, stiff), through(0.1, stiff)], sinks(3))[0]), [2, 1]);
  });

  it('loaded with exactly the sum of its limits still stands at the knee', () => {
    const limited: ModuleCurve = { ...brick, limit: { style: 'constant-current', current: 5.28 } };
    const points = groupPoints(
      [through(0.05, limited), through(0.05, limited), through(0.05, limited)],
      sinks(15.84),
    );
    expect(points).toHaveLength(1);
    expect(points[0]?.busVoltage).toBeCloseTo(15 - 5.28 * 0.1, 9);
  });

  it('of folding-back modules can rest high or low on the same load', () => {
    const folding: ModuleCurve = { ...brick, limit: { style: 'foldback', current: 5, shortCircuit: 1 } };
    const points = groupPoints([through(0.05, folding), through(0.05, folding)], sinks(6));
    expect(points.map(({ busVoltage }) => busVoltage > 10)).toEqual([true, false]);
    expectClose(currentsOf(points[0]), [3, 3]);
  });

  it('of modules that fold back to nothing gives nothing into a short, and never less', () => {
    for (const current of [3.3483710514010885, 4 * 0.8995753252, 5]) {
      const nothing: ModuleCurve = { ...brick, limit: { style: 'foldback', current, shortCircuit: 0 } };
      const [point] = groupPoints([through(0, nothing), through(0.05, nothing)], {
        kind: 'voltage',
        voltage: 0,
        leads: 0,
      });
      expect(currentsOf(point)).toEqual([0, 0]);
      expect(point?.current).toBe(0);
    }
  });

  it('of constant-power modules follows both hyperbolas', () => {
    const constantPower: ModuleCurve = { ...brick, limit: { style: 'constant-power', current: 5 } };
    const weaker: ModuleCurve = { ...constantPower, limit: { style: 'constant-power', current: 3 } };
    const [point] = groupPoints([through(0.05, constantPower), through(0.1, weaker)], sinks(15));
    const powers = point?.branches.map(({ current, voltage }) => current * voltage) ?? [];
    expectClose(powers, [14.75 * 5, 14.85 * 3]);
    expect(point?.current).toBeCloseTo(15, 12);
  });

  it('rests on both sides where constant power meets foldback', () => {
    const constantPower: ModuleCurve = { ...brick, limit: { style: 'constant-power', current: 1 } };
    const folding: ModuleCurve = { ...brick, limit: { style: 'foldback', current: 5, shortCircuit: 0.5 } };
    // 14.95 W/V + 0.5 A + V·4.5 A/14.75 V = 5.5 A has two roots; the current falls through the lower one.
    const points = groupPoints([through(0, constantPower), through(0, folding)], {
      kind: 'current',
      current: 5.5,
      leastVoltage: 0.1,
      leads: 0,
    });
    const rise = 4.5 / 14.75;
    expectClose(
      points.map(({ busVoltage }) => busVoltage),
      [points[0]?.busVoltage ?? NaN, (5 - Math.sqrt(25 - 4 * rise * 14.95)) / (2 * rise)],
    );
    expect(points[0]?.busVoltage).toBeGreaterThan(14.75);
    for (const { current } of points) expect(current).toBeCloseTo(5.5, 9);
  });

  it('answers for twenty modules as exactly as for two', () => {
    const group = Array.from({ length: 20 }, (_, index) => through(0.05, high(0.001 * index)));
    const [point] = groupPoints(group, sinks(60));
    expect(point?.current).toBeCloseTo(60, 12);
    // Millman, equal resistances: I/N and the distance from the mean voltage over 0.1 Ω.
    expectClose(
      currentsOf(point),
      group.map((_, index) => 3 + (0.001 * (index - 9.5)) / 0.1),
    );
  });
});

const steadyCurves = curvesWith(steadyLimits);
const anyCurves = curvesWith(fc.oneof(steadyLimits, foldbacks));

const groupsOf = (curves: fc.Arbitrary<ModuleCurve>): fc.Arbitrary<readonly Branch[]> =>
  fc.array(
    fc.oneof(
      { weight: 6, arbitrary: fc.tuple(curves, amount(0, 0.5)).map(([curve, ohms]) => through(ohms, curve)) },
      {
        weight: 2,
        arbitrary: fc
          .tuple(curves, amount(0.01, 1))
          .map(([curve, ohms]) => through(0.05, { ...curve, reverseResistance: ohms })),
      },
      { weight: 1, arbitrary: fc.constant(off(0.05)) },
    ),
    { minLength: 1, maxLength: 5 },
  );

describe('for any group and any load', () => {
  it('there is a point; at each the currents add up, and each is what its module gives at its terminals', () => {
    fc.assert(
      fc.property(groupsOf(anyCurves), laws, (group, law) => {
        const points = groupPoints(group, law);
        expect(points.length).toBeGreaterThan(0);
        for (const { busVoltage, current, branches } of points) {
          // Along steep stretches a voltage rounded in its last place is worth a little current.
          const tolerance = 1e-7 * (1 + branches.reduce((sum, branch) => sum + Math.abs(branch.current), 0));
          const sum = branches.reduce((total, branch) => total + branch.current, 0);
          expect(Math.abs(sum - current)).toBeLessThan(1e-12 * (1 + tolerance * 1e7));
          expect(Math.abs(currentDrawn(law, busVoltage) - current)).toBeLessThan(tolerance);
          for (const [index, { source, resistance }] of group.entries()) {
            const { current: own = NaN, voltage = NaN } = branches[index] ?? {};
            expect(Math.abs(voltage - busVoltage - resistance * own)).toBeLessThan(1e-9);
            const given = source.kind === 'off' ? 0 : currentAtVoltage(source.curve, voltage);
            expect(Math.abs(given - own)).toBeLessThan(tolerance);
            const letsBack = source.kind === 'module' && source.curve.reverseResistance !== undefined;
            if (!letsBack) expect(own).toBeGreaterThanOrEqual(0);
          }
        }
      }),
      { numRuns: 1000 },
    );
  });

  it('each point is stable, and they come highest voltage first', () => {
    fc.assert(
      fc.property(groupsOf(curvesWith(fc.oneof(foldbacks, steadyLimits))), laws, (group, law) => {
        const points = groupPoints(group, law);
        const voltages = points.map(({ busVoltage }) => busVoltage);
        expect([...voltages].sort((one, other) => other - one)).toEqual(voltages);
        for (const { busVoltage } of points) {
          const above = busVoltage * (1 + 1e-6);
          const [held] = groupPoints(group, { kind: 'voltage', voltage: above, leads: 0 });
          if (held !== undefined && held.busVoltage >= above) {
            expect(held.current).toBeLessThanOrEqual(currentDrawn(law, above) + 1e-9);
          }
        }
      }),
      { numRuns: 500 },
    );
  });

  it('one branch without resistance gives the very points of one module', () => {
    fc.assert(
      fc.property(anyCurves, laws, (curve, law) => {
        const alone = operatingPoints(curve, law);
        const group = groupPoints([through(0, curve)], law);
        expect(group).toHaveLength(alone.length);
        for (const [index, { voltage, current }] of alone.entries()) {
          expect(Math.abs((group[index]?.busVoltage ?? NaN) - voltage)).toBeLessThan(1e-10 * (1 + voltage));
          expect(Math.abs((group[index]?.current ?? NaN) - current)).toBeLessThan(1e-7 * (1 + current));
        }
      }),
      { numRuns: 1000 },
    );
  });

  it('more load never raises the bus', () => {
    fc.assert(
      fc.property(groupsOf(steadyCurves), amount(0, 40), amount(0, 10), (group, load, more) => {
        const busAt = (current: number): number =>
          groupPoints(group, { kind: 'current', current, leastVoltage: 1, leads: 0.02 })[0]?.busVoltage ??
          NaN;
        expect(busAt(load + more)).toBeLessThanOrEqual(busAt(load) + 1e-9);
      }),
      { numRuns: 500 },
    );
  });

  it('a module’s share rises as its ballast falls', () => {
    fc.assert(
      fc.property(
        fc.array(amount(0.01, 0.5), { minLength: 2, maxLength: 5 }),
        fc.array(amount(-0.1, 0.1), { minLength: 5, maxLength: 5 }),
        amount(0.1, 30),
        amount(0.1, 1),
        (ballasts, spreads, load, share) => {
          const shareOfFirst = (factor: number): number => {
            const group = ballasts.map((ohms, index) =>
              through(index === 0 ? ohms * factor : ohms, high(spreads[index] ?? 0)),
            );
            return currentsOf(groupPoints(group, sinks(load))[0])[0] ?? NaN;
          };
          expect(shareOfFirst(share)).toBeGreaterThanOrEqual(shareOfFirst(1) - 1e-9);
        },
      ),
      { numRuns: 500 },
    );
  });

  it('the order of the modules changes nothing but the order of the answer', () => {
    fc.assert(
      fc.property(
        groupsOf(anyCurves),
        laws,
        fc.array(fc.nat(), { minLength: 5, maxLength: 5 }),
        (group, law, keys) => {
          const order = group
            .map((_, index) => ({ index, key: keys[index] ?? 0 }))
            .sort((a, b) => a.key - b.key);
          const shuffled = order.flatMap(({ index }) => group[index] ?? []);
          const points = groupPoints(group, law);
          const others = groupPoints(shuffled, law);
          expect(others).toHaveLength(points.length);
          for (const [at, point] of points.entries()) {
            expect(Math.abs((others[at]?.busVoltage ?? NaN) - point.busVoltage)).toBeLessThan(1e-8);
            for (const [position, { index }] of order.entries()) {
              const there = others[at]?.branches[position]?.current ?? NaN;
              const here = point.branches[index]?.current ?? NaN;
              expect(Math.abs(there - here)).toBeLessThan(1e-6 * (1 + Math.abs(here)));
            }
          }
        },
      ),
      { numRuns: 500 },
    );
  });
});
