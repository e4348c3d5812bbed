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
  return earliest(faultsAt({ faults, modules }, group, post, what));
}

/** From when until when; until is infinite for what does not pass. */
export interface Spell {
  readonly from: Seconds;
  readonly until: Seconds;
}

/** When faults that pass are over the instrument at a post, in rising order. */
export function spellsOf(
  simulation: Pick<Simulation, 'faults' | 'modules'>,
  group: Group | undefined,
  post: Post,
  ...names: readonly FaultName[]
): readonly Spell[] {
  return names
    .flatMap((what) => faultsAt(simulation, group, post, what))
    .map(({ at, for: lasting = Number.POSITIVE_INFINITY }) => ({ from: at, until: at + lasting }))
    .toSorted((one, other) => one.from - other.from);
}

/** Whether one of them is on at a moment. */
export function isOn(spells: readonly Spell[], at: Seconds): boolean {
  return spells.some(({ from, until }) => from <= at && at < until);
}

function faultsAt(
  { faults, modules }: Pick<Simulation, 'faults' | 'modules'>,
  group: Group | undefined,
  post: Post,
  what: FaultName,
): readonly SimulatedFault[] {
  return faults.filter((fault) => {
    if (fault.what !== what) return false;
    if (fault.of === undefined || roleOf(post) !== 'meter') return true;
    if (post === 'meter') return group?.measuredBy !== 'meters';
    return modules[Number(post.slice('meter-'.length)) - 1]?.name === fault.of;
  });
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
