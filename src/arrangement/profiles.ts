import type { UnfitModule } from './arrangement-error.js';
import type { ModuleProfile } from './module-profile.js';
import type { UnderstoodRecord } from './understood-record.js';

/** What a heap of records comes to: the modules that something can be built on, and those that it can't. */
export interface ProfilesFound {
  readonly profiles: readonly ModuleProfile[];
  readonly unfit: readonly UnfitModule[];
}

export function profilesOf(records: readonly UnderstoodRecord[], today: Date): ProfilesFound {
  void records;
  void today;
  return { profiles: [], unfit: [] };
}

/** Leaves out the modules that were measured by another procedure than most. For `select`: give it what this gives. */
export function alikeOnly(found: ProfilesFound): ProfilesFound {
  return found;
}

/** @throws UnfitRecordsError */
export function requireAll(found: ProfilesFound): readonly ModuleProfile[] {
  return found.profiles;
}
