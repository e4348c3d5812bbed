import { describe, expect, it } from 'vitest';
import { dcSource } from '../../../src/simulation/dialects/dc-source.js';
import type { Interpreter } from '../../../src/simulation/dialects/dialect.js';
import { sourceAtRest, type SourceState } from '../../../src/simulation/virtual-source.js';

function awake(): { readonly source: Interpreter; readonly state: () => SourceState } {
  if (dcSource.role !== 'source') throw new Error('not a source');
  let state = sourceAtRest;
  const source = dcSource.wake({
    identity: 'K',
    most: { voltage: 60, current: 10 },
    state: () => state,
    set: (change) => {
      state = { ...state, ...change };
    },
    measure: (what) => (what === 'voltage' ? 23.98 : 1.25),
  });
  return { source, state: () => state };
}

describe('a source of the standard subsystems', () => {
  it.each([
    ['OUTP ON', 'OUTP:STAT 1', 'output 1'],
    ['OUTP ON', 'OUTPut:STATe ON'],
  ])('is switched on by %s', (...messages) => {
    for (const message of messages) {
      const { source, state } = awake();
      source.hear(message);
      expect(state().output).toBe('on');
      expect(source.hear('OUTP?').reply).toBe('1');
      source.hear('OUTP OFF');
      expect(state().output).toBe('off');
      expect(source.hear('OUTPUT:STATE?').reply).toBe('0');
    }
  });

  it.each(['VOLT 24;CURR 4', 'SOUR:VOLT 24 V;:SOUR:CURR 4000 mA', 'voltage:level 2.4E1;:current 4'])(
    'is told by %s what to give, and its output is not touched',
    (message) => {
      const { source, state } = awake();
      source.hear(message);
      expect(source.hear('SYST:ERR?').reply).toBe('0,"No error"');
      expect(state()).toEqual({ output: 'off', setVoltage: 24, setCurrent: 4 });
    },
  );

  it('says what it was told, and what it gives', () => {
    const { source } = awake();
    source.hear('VOLT 24');
    expect(Number(source.hear('VOLT?').reply)).toBe(24);
    expect(Number(source.hear('MEAS:VOLT?').reply)).toBe(23.98);
    expect(Number(source.hear('MEASure:SCALar:CURRent:DC?').reply)).toBe(1.25);
  });

  it('does not take more than it has, and says so', () => {
    const { source, state } = awake();
    source.hear('VOLT 61');
    expect(source.hear('SYST:ERR?').reply).toMatch(/^-222,/);
    source.hear('INP ON');
    expect(source.hear('SYST:ERR?').reply).toMatch(/^-113,/);
    expect(state()).toEqual(sourceAtRest);
  });

  it('is at rest again after *RST', () => {
    const { source, state } = awake();
    source.hear('VOLT 24;:OUTP ON');
    expect(state().output).toBe('on');
    source.hear('*RST');
    expect(state()).toEqual(sourceAtRest);
  });
});
