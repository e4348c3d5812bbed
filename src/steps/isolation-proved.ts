import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import type { EarthRelation } from '../circuit/earth-relation.js';
import type { StepContext } from './step-kind.js';

/** A module may not be stacked as it is, or nobody has shown that it may. Nothing was loaded. */
export class NotIsolatedError extends RailproofError {
  readonly code = 'NOT_ISOLATED';
  readonly exitCode = exitCodes.stopped;
  readonly module: string;
  /** Undefined where no step of this run has looked. */
  readonly earth: EarthRelation | undefined;

  constructor(module: string, earth: EarthRelation | undefined) {
    super(`${module} may not be stacked: ${reasonOf(earth)}`, { advice: adviceOn(earth) });
    this.module = module;
    this.earth = earth;
  }
}

/**
 * Stacked, every output but the lowest floats at the sum of those below it; one that is tied to earth would
 * short them. So each module must have been shown to be isolated earlier in this run.
 * @throws NotIsolatedError for the first that was not.
 */
export function requireIsolation({ underTest, earths }: Pick<StepContext, 'underTest' | 'earths'>): void {
  for (const { name } of underTest.modules) {
    const earth = earths.get(name);
    if (earth !== 'isolated') throw new NotIsolatedError(name, earth);
  }
}

function reasonOf(earth: EarthRelation | undefined): string {
  switch (earth) {
    case 'bonded':
      return 'its output is tied to earth, which in a stack would short the modules below it';
    case 'leaky':
      return 'its output leaks to earth, and in a stack the voltage of the modules below would drive a current through that leak';
    case 'undetermined':
    case 'isolated':
      return 'it could not be told how its output stands to earth';
    case undefined:
      return 'nobody has shown in this run how its output stands to earth';
  }
}

function adviceOn(earth: EarthRelation | undefined): string {
  return earth === 'bonded' || earth === 'leaky'
    ? 'leave it out of the stack; whether its earth link may be removed is for local codes and a licensed person to decide'
    : 'put an isolation-check before the stack-check, and see that its leads are sound';
}
