import { describe, expect, it } from 'vitest';
import { forwardCurrent, forwardVoltage, thermalVoltage } from '../../src/circuit/shockley-diode.js';
import fc from '../property.js';

const silicon = { saturationCurrent: 1e-14, idealityFactor: 1, temperature: 300 };

describe('a diode', () => {
  it('has the thermal voltage that textbooks give for 300 K, 25.85 mV', () => {
    expect(thermalVoltage(silicon)).toBeCloseTo(0.02585, 5);
    expect(thermalVoltage({ ...silicon, idealityFactor: 2 })).toBeCloseTo(0.0517, 5);
  });

  it('needs 60 mV more for ten times the current', () => {
    expect(forwardVoltage(silicon, 1) - forwardVoltage(silicon, 0.1)).toBeCloseTo(0.0595, 4);
  });

  it('lets nothing through at 0 V and no more than its saturation current backwards', () => {
    expect(forwardCurrent(silicon, 0)).toBe(0);
    expect(forwardCurrent(silicon, -5)).toBeCloseTo(-1e-14, 20);
  });

  it('comes back from current to voltage to current', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-9, max: 100, noNaN: true }), (current) => {
        expect(forwardCurrent(silicon, forwardVoltage(silicon, current)) / current).toBeCloseTo(1, 9);
      }),
    );
  });
});
