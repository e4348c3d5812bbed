import { describe, expect, it } from 'vitest';
import { type Branch, groupPoints } from '../../src/circuit/parallel-group.js';
import { branchCurrents } from '../../src/circuit/shared-load.js';
import fc from '../property.js';
import { amount } from './any-circuit.js';

describe('branches that feed one load, below all limits', () => {
  // Worked by hand: the bus stands at (15.1/0.1 + 15/0.1 − 4)/20 = 14.85 V.
  it('share by their voltages and resistances', () => {
    const currents = branchCurrents(
      [
        { voltage: 15.1, resistance: 0.1 },
        { voltage: 15, resistance: 0.1 },
      ],
      4,
    );
    expect(currents[0]).toBeCloseTo(2.5, 12);
    expect(currents[1]).toBeCloseTo(1.5, 12);
  });

  it('give nothing while the bus stands above them', () => {
    const low = { voltage: 14, resistance: 0.1 };
    expect(branchCurrents([low, { voltage: 15, resistance: 0.1 }], 4)).toEqual([0, expect.closeTo(4, 12)]);
  });

  it('share as a group of modules does that are nowhere near their limits', () => {
    fc.assert(
      fc.property(
        fc.array(fc.tuple(amount(11, 16), amount(0.001, 0.3), amount(0, 1)), { minLength: 1, maxLength: 6 }),
        amount(0.01, 20),
        (drawn, load) => {
          const branches = drawn.map(([voltage, resistance]) => ({ voltage, resistance }));
          const group = drawn.map(([openCircuitVoltage, resistance, droopShare]): Branch => ({
            source: {
              kind: 'module',
              curve: {
                openCircuitVoltage,
                droopResistance: droopShare * resistance,
                limit: { style: 'constant-current', current: 1000 },
              },
            },
            resistance: (1 - droopShare) * resistance,
          }));
          const [point] = groupPoints(group, { kind: 'current', current: load, leastVoltage: 0, leads: 0 });
          for (const [index, current] of branchCurrents(branches, load).entries()) {
            expect(Math.abs((point?.branches[index]?.current ?? NaN) - current)).toBeLessThan(1e-8);
          }
        },
      ),
      { numRuns: 500 },
    );
  });
});
