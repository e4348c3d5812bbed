import { beforeEach, describe, expect, it } from 'vitest';
import type { Interpreter } from '../../../src/simulation/dialects/dialect.js';
import { standardLoad } from '../../../src/simulation/dialects/standard-load.js';
import { type LoadState, loadAtRest } from '../../../src/simulation/virtual-load.js';

let state: LoadState;
let load: Interpreter;

beforeEach(() => {
  state = loadAtRest;
  if (standardLoad.role !== 'load') throw new Error('not a load');
  load = standardLoad.wake({
    identity: 'railproof,simulated load,K-bench,1',
    most: { current: 40, voltage: 150 },
    state: () => state,
    set: (change) => {
      state = { ...state, ...change };
    },
    measure: (what) => ({ voltage: 15.2, current: 4, power: 60.8 })[what],
  });
});

describe('a load of the standard subsystems', () => {
  it.each([
    ['INP ON', { input: 'on' }],
    [':INPUT:STATE 1', { input: 'on' }],
    ['inp on;inp off', { input: 'off' }],
    ['FUNC VOLT', { mode: 'voltage' }],
    ['function:mode VOLTAGE', { mode: 'voltage' }],
    ['CURR 2.5', { setCurrent: 2.5 }],
    ['CURR:LEV 2;PROT 3', { setCurrent: 2, protection: { current: 3 } }],
    ['CURR:LEV 2;*CLS;PROT 3', { setCurrent: 2, protection: { current: 3 } }],
    ['CURR 2;:VOLT 12', { setCurrent: 2, setVoltage: 12 }],
    ['CURR 2;INP ON', { setCurrent: 2, input: 'on' }],
    ['CURR MAX', { setCurrent: 40 }],
    ['INP ON;:CURR 3;*RST', { input: 'off', setCurrent: 0 }],
  ])('obeys %s', (message, expected) => {
    expect(load.hear(message)).toEqual({ reply: undefined, understood: true });
    expect(state).toMatchObject(expected);
    expect(load.hear('SYST:ERR?').reply).toBe('0,"No error"');
  });

  it.each([
    ['*IDN?', 'railproof,simulated load,K-bench,1'],
    ['INP?', '0'],
    ['FUNC?', 'CURR'],
    ['CURR 2.5;CURR?', '+2.500000E+00'],
    ['CURR? MAX', '+4.000000E+01'],
    ['MEAS:VOLT?', '+1.520000E+01'],
    ['MEAS:VOLT?;CURR?;POW?', '+1.520000E+01;+4.000000E+00;+6.080000E+01'],
    ['*OPC?;:INP?', '1;0'],
  ])('answers %s with %s', (message, reply) => {
    expect(load.hear(message)).toEqual({ reply, understood: true });
  });

  // The numbers and texts are those of SCPI-99, volume 2, 21.8.
  it.each([
    ['CURENT 2', '-113,"Undefined header"'],
    ['MEAS:VOLT', '-113,"Undefined header"'],
    ['*IDN', '-113,"Undefined header"'],
    // Counted from MEAS, as the standard has it, there is no INP.
    ['MEAS:VOLT?;INP?', '-113,"Undefined header"'],
    ['CURR', '-109,"Missing parameter"'],
    ['CURR 2,3', '-108,"Parameter not allowed"'],
    ['INP? 1', '-108,"Parameter not allowed"'],
    ['CURR much', '-104,"Data type error"'],
    ['CURR 2 V', '-131,"Invalid suffix"'],
    ['CURR 41', '-222,"Data out of range"'],
    ['INP MAYBE', '-224,"Illegal parameter value"'],
    ['FUNC POW', '-224,"Illegal parameter value"'],
    ['%$!', '-102,"Syntax error"'],
  ])('complains about %s on its queue with %s', (message, complaint) => {
    expect(load.hear(message).understood).toBe(false);
    expect(load.hear('SYST:ERR?').reply).toBe(complaint);
    expect(load.hear('SYST:ERR?').reply).toBe('0,"No error"');
    expect(state).toEqual(loadAtRest);
  });

  it('keeps its complaints in order, says when there were too many, and forgets them at *CLS', () => {
    load.hear('NONSENSE');
    load.hear('CURR 99');
    expect(load.hear('SYST:ERR?;:SYST:ERR:NEXT?').reply).toBe(
      '-113,"Undefined header";-222,"Data out of range"',
    );
    for (let count = 0; count < 50; count++) load.hear('NONSENSE');
    const complaints = Array.from({ length: 17 }, () => load.hear('SYST:ERR?').reply);
    expect(complaints.slice(-2)).toEqual(['-350,"Queue overflow"', '0,"No error"']);
    load.hear('NONSENSE');
    expect(load.hear('*CLS;SYST:ERR?').reply).toBe('0,"No error"');
  });

  it('complains when more came than its input buffer holds', () => {
    load.overrun();
    expect(load.hear('SYST:ERR?').reply).toBe('-363,"Input buffer overrun"');
  });
});
