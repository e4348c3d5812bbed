import { describe, expect, it } from 'vitest';
import { moduleVoltageErrors, promised, promisedErrors } from '../../src/analysis/promised-errors.js';
import { headerOf } from './evidence-of.js';

const accuracy = { ofReading: 0.003, fixed: 0.006, resolution: 0.002 };

describe('what an instrument promises', () => {
  it('is taken as rectangular: half-widths over √3, and the last digit over √12', () => {
    // JCGM 100:2008, 4.3.7.
    expect(promisedErrors(headerOf({ load: { current: accuracy } }), 'load', 'current')).toEqual({
      of: 'load current',
      gain: expect.closeTo(0.003 / Math.sqrt(3), 15) as number,
      offset: expect.closeTo(0.006 / Math.sqrt(3), 15) as number,
      resolution: expect.closeTo(0.002 / Math.sqrt(12), 15) as number,
    });
  });

  it('is nothing where there is no such instrument or reading', () => {
    const nothing = { gain: 0, offset: 0, resolution: 0 };
    expect(promisedErrors(headerOf(), 'scanner', 'voltage')).toEqual({ of: 'scanner voltage', ...nothing });
    expect(promisedErrors(headerOf(), 'load', 'power')).toEqual({ of: 'load power', ...nothing });
  });

  it('for the voltage at the module, is the meter’s, or the load’s and the leads’', () => {
    const parts = { meter: { voltage: accuracy }, leads: { resistance: 0.035, uncertainty: 0.005 } };
    expect(moduleVoltageErrors(headerOf(parts))).toMatchObject({
      instrument: { of: 'meter voltage' },
      leads: 0,
    });
    const atLoad = moduleVoltageErrors(headerOf({ ...parts, voltageFrom: 'load-terminals' }));
    expect(atLoad.instrument.of).toBe('load voltage');
    expect(atLoad.leads).toBeCloseTo(0.005 / Math.sqrt(3), 15);
  });

  it('enters a budget as Type B, taken as known, and never negative', () => {
    expect(promised('gain', -0.1)).toEqual({
      name: 'gain',
      kind: 'B',
      uncertainty: 0.1,
      degreesOfFreedom: Infinity,
    });
  });
});
