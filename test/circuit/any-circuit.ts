import type { LoadLaw } from '../../src/circuit/load-law.js';
import type { CurveLimit, ModuleCurve } from '../../src/circuit/module-curve.js';
import fc from '../property.js';

export const amount = (min: number, max: number): fc.Arbitrary<number> =>
  fc.double({ min, max, noNaN: true });

/** Limits along which the current never rises with the voltage. */
export const steadyLimits: fc.Arbitrary<CurveLimit> = fc.oneof(
  fc.record({ style: fc.constant('constant-current' as const), current: amount(0.5, 15) }),
  fc.record({
    style: fc.constant('constant-current' as const),
    current: amount(0.5, 15),
    slope: amount(0.5, 50),
  }),
  fc.record({ style: fc.constant('constant-power' as const), current: amount(0.5, 15) }),
);

export const foldbacks: fc.Arbitrary<CurveLimit> = fc
  .record({ current: amount(0.5, 15), share: amount(0.05, 0.9) })
  .map(({ current, share }) => ({ style: 'foldback', current, shortCircuit: current * share }));

export function curvesWith(limit: fc.Arbitrary<CurveLimit>): fc.Arbitrary<ModuleCurve> {
  return fc.record({ openCircuitVoltage: amount(3, 60), droopResistance: amount(0.001, 0.2), limit });
}

export const laws: fc.Arbitrary<LoadLaw> = fc.oneof(
  fc.constant<LoadLaw>({ kind: 'open' }),
  fc.record({
    kind: fc.constant('current' as const),
    current: amount(0, 40),
    leastVoltage: amount(0.1, 2),
    leads: amount(0, 0.2),
  }),
  fc.record({ kind: fc.constant('voltage' as const), voltage: amount(0.1, 70), leads: amount(0.001, 0.2) }),
  fc.record({
    kind: fc.constant('resistance' as const),
    resistance: amount(0.1, 100),
    leads: amount(0.001, 0.2),
  }),
);
