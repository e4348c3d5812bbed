import { readdirSync } from 'node:fs';
import { join } from 'node:path';

/** The drawer of records that comes with the program. */
export const drawer = 'fixtures/runs';

/** The kept records of a module: `of('K1')`, or of one procedure: `of('K1', 'real-limit')`. */
export function keptOf(module: string, procedure = ''): string[] {
  return readdirSync(drawer)
    .filter((name) => name.includes(`-${module}-`) && name.endsWith(procedure))
    .map((name) => join(drawer, name));
}
