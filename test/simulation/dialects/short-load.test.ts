import { beforeEach, describe, expect, it } from 'vitest';
import type { Interpreter } from '../../../src/simulation/dialects/dialect.js';
import { shortLoad } from '../../../src/simulation/dialects/short-load.js';
import { type LoadState, loadAtRest } from '../../../src/simulation/virtual-load.js';

let state: LoadState;
let load: Interpreter;

beforeEach(() => {
  state = loadAtRest;
  if (shortLoad.role !== 'load') throw new Error('not a load');
  load = shortLoad.wake({
    identity: 'railproof,simulated load,K-bench,1',
    most: { current: 30, voltage: 150 },
    state: () => state,
    set: (change) => {
      state = { ...state, ...change };
    },
    measure: (what) => (what === 'voltage' ? 15.21 : 3.998),
  });
});

describe('a load of the short style', () => {
  it.each([
    ['INP 1', { input: 'on' }],
    ['inp 0', { input: 'off' }],
    ['MODE CV', { mode: 'voltage' }],
    ['CUR 2.5', { setCurrent: 2.5 }],
    ['VOL 12', { setVoltage: 12 }],
  ])('obeys %s without a word', (message, expected) => {
    expect(load.hear(message)).toEqual({ reply: undefined, understood: true });
    expect(state).toMatchObject(expected);
  });

  it.each([
    ['VOL?', '15.210V'],
    ['CUR?', '3.998A'],
    ['INP?', '0'],
    ['*IDN?', 'railproof,simulated load,K-bench,1'],
  ])('answers %s with %s', (message, reply) => {
    expect(load.hear(message)).toEqual({ reply, understood: true });
  });

  it.each(['INP ON', 'SYST:ERR?', 'MEAS:VOLT?', 'CUR 31', 'CUR -1', 'CUR', 'INP 1;INP 0', ''])(
    'takes no notice of %j',
    (message) => {
      expect(load.hear(message)).toEqual({ reply: undefined, understood: false });
      expect(state).toEqual(loadAtRest);
    },
  );
});
