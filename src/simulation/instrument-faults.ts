import { type Group, type Post, roleOf } from '../files/bench.js';
import type { FaultName, SimulatedFault, Simulation } from '../files/simulation-section.js';
import type { Seconds } from '../quantity/quantity.js';

/**
 * When a fault comes over the instrument at a post; never, where it does not. A fault of a meter that names a
 * module is that of the module's own meter, where the places have meters of their own.
 */
export function faultTime(
  { faults, modules }: Pick<Simulation, 'faults' | 'modules'>,
  group: Group | undefined,
  post: Post,
  what: FaultName,
): Seconds {
  return earliest(
    faults.filter((fault) => {
      if (fault.what !== what) return false;
      if (fault.of === undefined || roleOf(post) !== 'meter') return true;
      if (post === 'meter') return group?.measuredBy !== 'meters';
      return modules[Number(post.slice('meter-'.length)) - 1]?.name === fault.of;
    }),
  );
}

/** When the probes at a module's place come to be swapped; at every place, where none is named. */
export function reversedFrom({ faults }: Pick<Simulation, 'faults'>, module: string): Seconds {
  return earliest(
    faults.filter(({ what, of }) => what === 'probes-reversed' && (of === undefined || of === module)),
  );
}

function earliest(faults: readonly SimulatedFault[]): Seconds {
  return Math.min(Number.POSITIVE_INFINITY, ...faults.map(({ at }) => at));
}
