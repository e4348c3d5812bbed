import type { LoadLaw } from '../circuit/load-law.js';
import type { CircuitState } from './circuit-state.js';
import type { SimulatedCircuit } from './resting-point.js';
import { atAnyTime, settle } from './settle.js';
import type { Which } from './standing.js';

/** What decides the phases, as warming moves it: which modules are held now, or could be if they tried? */
export function outlook(circuit: SimulatedCircuit, state: CircuitState, law: LoadLaw): Which {
  return held(settle(circuit, state, law, atAnyTime, () => []));
}

/** Which modules are held now. */
export function held({ modules }: CircuitState): Which {
  return modules.map(({ phase }) => phase.kind === 'held');
}

export function isSameFor(some: Which, others: Which): boolean {
  return some.every((is, place) => is === others[place]);
}
