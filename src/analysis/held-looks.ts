import type { RunHeader } from '../record/run-header.js';
import type { GroupLook } from './module-currents.js';
import { isComplete } from './place-looks.js';

/** The points that a group held and at which every module's current is known, by rising load, the latest last. */
export function heldLooks(header: RunHeader, looks: readonly GroupLook[]): readonly GroupLook[] {
  return looks
    .filter((look) => look.kind === 'climb' && look.outcome === 'held' && look.total > 0)
    .filter((look) => isComplete(look, header) && look.currents.length === header.modules.length)
    .sort((one, other) => (one.set ?? 0) - (other.set ?? 0));
}
