import { existsSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { exitCodes, RailproofError } from '../errors/railproof-error.js';

/** The names of the records that a folder holds, oldest first. @throws NoRunsError */
export function recordNames(folder: string): string[] {
  try {
    return readdirSync(folder)
      .filter((name) => existsSync(join(folder, name, 'run.json')))
      .sort();
  } catch (cause) {
    throw new NoRunsError(folder, cause);
  }
}

/** There is no folder to list. */
export class NoRunsError extends RailproofError {
  readonly code = 'NO_RUNS';
  readonly exitCode = exitCodes.missingFile;

  constructor(folder: string, cause: unknown) {
    super(`${folder} can't be listed: there is no such folder`, {
      advice:
        'records are kept in ./runs unless `railproof run --runs <folder>` said otherwise; then name it: railproof runs <folder>',
      cause,
    });
  }
}
