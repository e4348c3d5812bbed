import type { Dialect, Interpreter } from '../../../src/simulation/dialects/dialect.js';
import { type LoadState, loadAtRest } from '../../../src/simulation/virtual-load.js';

/** A load that speaks a dialect and reads 15.2 V, 4 A and 60.8 W; `state` is what it was told. */
export function anyLoad(dialect: Dialect): { readonly load: Interpreter; readonly state: () => LoadState } {
  if (dialect.role !== 'load') throw new Error('not a load');
  let state = loadAtRest;
  const load = dialect.wake({
    identity: 'railproof,simulated load,K-bench,1',
    most: { current: 40, voltage: 150 },
    state: () => state,
    set: (change) => {
      state = { ...state, ...change };
    },
    measure: (what) => ({ voltage: 15.2, current: 4, power: 60.8 })[what],
  });
  return { load, state: () => state };
}
