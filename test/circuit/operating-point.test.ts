import { describe, expect, it } from 'vitest';
import { type LoadLaw, currentDrawn } from '../../src/circuit/load-law.js';
import { type ModuleCurve, currentAtVoltage } from '../../src/circuit/module-curve.js';
import { operatingPoints } from '../../src/circuit/operating-point.js';
import fc from '../property.js';

const line = { openCircuitVoltage: 15, droopResistance: 0.1 };
const constantCurrent: ModuleCurve = { ...line, limit: { style: 'constant-current', current: 5 } };
const foldback: ModuleCurve = { ...line, limit: { style: 'foldback', current: 5, shortCircuit: 1 } };
const constantPower: ModuleCurve = { ...line, limit: { style: 'constant-power', current: 5 } };
const sinks = (current: number): LoadLaw => ({ kind: 'current', current, leastVoltage: 1, leads: 0.05 });
const holds = (voltage: number, leads = 0.05): LoadLaw => ({ kind: 'voltage', voltage, leads });

describe('a module and a load', () => {
  // Worked by hand from V = 15 − 0.1·I, the limit of 5 A, and a load that is a resistor below its least voltage.
  it.each<[string, ModuleCurve, LoadLaw, readonly (readonly [number, number])[]]>([
    ['rest at the open-circuit voltage when the input is off', constantCurrent, { kind: 'open' }, [[15, 0]]],
    ['rest on the regulated line', constantCurrent, sinks(4), [[14.6, 4]]],
    [
      'collapse to where the load saturates beyond the limit',
      constantCurrent,
      sinks(6),
      [[(1.3 / 6) * 5, 5]],
    ],
    ['rest at the knee when exactly the limit is drawn', constantCurrent, sinks(5), [[14.5, 5]]],
    [
      'have a second point on a folding-back module',
      foldback,
      sinks(4),
      [
        [14.6, 4],
        [1 / (4 / 1.2 - 4 / 14.5), 4 / (1.2 * (4 / 1.2 - 4 / 14.5))],
      ],
    ],
    ['have but one below the short-circuit current', foldback, sinks(0.9), [[14.91, 0.9]]],
    ['follow the hyperbola of a constant-power module', constantPower, sinks(10), [[7.25, 10]]],
    ['meet on the regulated line at a held voltage', constantCurrent, holds(14.4), [[14.6, 4]]],
    ['meet at the limit at a held voltage', constantCurrent, holds(8), [[8.25, 5]]],
    ['meet on the foldback line without leads', foldback, holds(7.25, 0), [[7.25, 3]]],
    ['meet at a dead short', foldback, holds(0, 0), [[0, 1]]],
    ['draw nothing when the held voltage is never reached', constantCurrent, holds(20), [[15, 0]]],
  ])('%s', (_, curve, law, expected) => {
    const points = operatingPoints(curve, law);
    expect(points).toHaveLength(expected.length);
    for (const [index, [voltage, current]] of expected.entries()) {
      expect(points[index]?.voltage).toBeCloseTo(voltage, 9);
      expect(points[index]?.current).toBeCloseTo(current, 9);
    }
  });

  it('without droop stand at the module’s voltage', () => {
    const stiff: ModuleCurve = { ...constantCurrent, droopResistance: 0 };
    expect(operatingPoints(stiff, sinks(3))).toEqual([{ voltage: 15, current: 3 }]);
    expect(operatingPoints(stiff, holds(14.9))[0]?.current).toBeCloseTo(2, 9);
  });
});

const amount = (min: number, max: number): fc.Arbitrary<number> => fc.double({ min, max, noNaN: true });
const curves: fc.Arbitrary<ModuleCurve> = fc
  .record({
    openCircuitVoltage: amount(3, 60),
    droopResistance: amount(0.001, 0.2),
    current: amount(0.5, 15),
    share: amount(0.05, 0.9),
    style: fc.constantFrom('constant-current', 'foldback', 'constant-power'),
  })
  .map(({ current, share, style, ...regulated }) => ({
    ...regulated,
    limit:
      style === 'foldback' ? { style, current, shortCircuit: current * share } : { style: style, current },
  }));
const laws: fc.Arbitrary<LoadLaw> = fc.oneof(
  fc.constant<LoadLaw>({ kind: 'open' }),
  fc.record({
    kind: fc.constant('current' as const),
    current: amount(0, 20),
    leastVoltage: amount(0.1, 2),
    leads: amount(0, 0.2),
  }),
  fc.record({ kind: fc.constant('voltage' as const), voltage: amount(0.1, 70), leads: amount(0.001, 0.2) }),
);

describe('for any module and any load', () => {
  it('there is a point, and each satisfies both the module’s curve and the load’s law', () => {
    fc.assert(
      fc.property(curves, laws, (curve, law) => {
        const points = operatingPoints(curve, law);
        expect(points.length).toBeGreaterThan(0);
        for (const { voltage, current } of points) {
          const delivered = currentAtVoltage(curve, voltage);
          const drawn = currentDrawn(law, voltage);
          // Along steep stretches a voltage rounded in its last place is worth a little current.
          const tolerance = 1e-7 * (1 + current);
          expect(Math.abs(drawn - current)).toBeLessThan(tolerance);
          expect(Math.abs(delivered - current)).toBeLessThan(tolerance);
        }
      }),
      { numRuns: 1000 },
    );
  });

  it('each point is stable: a little above it the load takes more than the module gives', () => {
    fc.assert(
      fc.property(curves, laws, (curve, law) => {
        for (const { voltage } of operatingPoints(curve, law)) {
          const above = voltage * (1 + 1e-6);
          expect(currentDrawn(law, above)).toBeGreaterThanOrEqual(currentAtVoltage(curve, above) - 1e-9);
        }
      }),
      { numRuns: 1000 },
    );
  });
});
