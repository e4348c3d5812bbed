import type { Seconds } from '../quantity/quantity.js';
import { type ModuleState, freshModule } from './virtual-module.js';

/** All modules of a circuit at one moment, in its order. */
export interface CircuitState {
  readonly at: Seconds;
  readonly modules: readonly ModuleState[];
}

/** Cold, with every input present. */
export function freshCircuit(modules: readonly unknown[], at: Seconds): CircuitState {
  return { at, modules: modules.map(() => freshModule(at)) };
}
