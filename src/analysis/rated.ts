import { type Nameplate, nameplateOf } from '../circuit/nameplate.js';
import type { RunHeader } from '../record/run-header.js';

/** The nameplate of what was connected: of the one module, or what the circuit makes of several labels. */
export function ratedOf({ circuit, modules }: Pick<RunHeader, 'circuit' | 'modules'>): Nameplate {
  const [first, ...others] = modules.map(({ rated }) => rated);
  if (first === undefined) throw new Error('a record is of at least one module');
  return nameplateOf(circuit, [first, ...others]);
}
