import { describe, expect, it } from 'vitest';
import { channelLoad } from '../../../src/simulation/dialects/channel-load.js';
import { loadAtRest } from '../../../src/simulation/virtual-load.js';
import { anyLoad } from './any-load.js';

describe('a load of several channels', () => {
  it('does on the one that is selected what it is told; the module hangs on the first that is spoken to', () => {
    const { load, state } = anyLoad(channelLoad);
    load.hear('INST:NSEL 2;:CURR 3;:INP ON');
    expect(state()).toMatchObject({ input: 'on', setCurrent: 3 });
    expect(load.hear('INST:NSEL?;:MEAS:VOLT?').reply).toBe('+2;+1.520000E+01');
  });

  it('has nothing at its other channels, and keeps what each was told', () => {
    const { load, state } = anyLoad(channelLoad);
    load.hear('INST:NSEL 2;:INP ON');
    expect(load.hear('INST:NSEL 3;:INP?;:MEAS:VOLT?').reply).toBe('0;+0.000000E+00');
    load.hear('CURR 5');
    expect(load.hear('CURR?').reply).toBe('+5.000000E+00');
    expect(load.hear('INST:NSEL 2;:CURR?;:INP?').reply).toBe('+0.000000E+00;1');
    expect(load.hear('INST:NSEL 3;:CURR?').reply).toBe('+5.000000E+00');
    load.hear('*RST');
    expect(state()).toEqual(loadAtRest);
    expect(load.hear('INST:NSEL?').reply).toBe('+1');
  });

  it.each([
    ['INST:NSEL', '-109,"Missing parameter"'],
    ['INST:NSEL 1,2', '-108,"Parameter not allowed"'],
    ['INST:NSEL? 1', '-108,"Parameter not allowed"'],
    ['INST:NSEL CH1', '-104,"Data type error"'],
    ['INST:NSEL 9', '-222,"Data out of range"'],
    ['INST:NSEL 0', '-222,"Data out of range"'],
  ])('complains about %s', (message, complaint) => {
    const { load } = anyLoad(channelLoad);
    expect(load.hear(message).understood).toBe(false);
    expect(load.hear('SYST:ERR?').reply).toBe(complaint);
    expect(load.hear('INST:NSEL?').reply).toBe('+1');
  });
});
