import { describe, expect, it } from 'vitest';
import { remoteLoad } from '../../../src/simulation/dialects/remote-load.js';
import { loadAtRest } from '../../../src/simulation/virtual-load.js';
import { anyLoad } from './any-load.js';

describe('a load that must be put in remote first', () => {
  it.each(['', 'INP ON', 'CURR 2', 'INP?', 'SYST:ERR?', '*CLS', '*IDN?;INP?'])(
    'does not hear "%s" before',
    (message) => {
      const { load, state } = anyLoad(remoteLoad);
      expect(load.hear(message)).toEqual({ reply: undefined, understood: false });
      expect(state()).toEqual(loadAtRest);
    },
  );

  it('says who it is all the same', () => {
    expect(anyLoad(remoteLoad).load.hear('*IDN?').reply).toBe('railproof,simulated load,K-bench,1');
  });

  it('obeys once it is in remote, until it is given back', () => {
    const { load, state } = anyLoad(remoteLoad);
    expect(load.hear('SYST:REM').understood).toBe(true);
    load.hear('CURR 2;INP ON');
    expect(state()).toMatchObject({ input: 'on', setCurrent: 2 });
    load.hear('SYST:LOC');
    load.hear('INP OFF');
    expect(state()).toMatchObject({ input: 'on' });
    expect(load.hear('INP?').reply).toBeUndefined();
    load.hear(':SYSTEM:REMOTE');
    expect(load.hear('INP?;:SYST:ERR?').reply).toBe('1;0,"No error"');
  });
});
