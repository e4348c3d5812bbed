import { exitCodes, RailproofError } from '../errors/railproof-error.js';

/** Something is asked of a module that is not on the simulated bench. */
export class UnknownModuleError extends RailproofError {
  readonly code = 'SIMULATION_UNKNOWN_MODULE';
  readonly exitCode = exitCodes.badFile;
  readonly module: string;
  readonly modules: readonly string[];

  constructor(facts: { module: string; modules: readonly string[] }) {
    super(`there is no module "${facts.module}" on the simulated bench`, {
      advice: `There ${facts.modules.length === 1 ? 'is' : 'are'} ${facts.modules.join(', ')}.`,
    });
    this.module = facts.module;
    this.modules = facts.modules;
  }
}
