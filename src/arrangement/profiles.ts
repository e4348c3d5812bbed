import { UnfitRecordsError, UnfitWishError, type UnfitModule } from './arrangement-error.js';
import { comparableLines, linesOf } from './line-record.js';
import type { ModuleProfile } from './module-profile.js';
import { byModule } from './module-records.js';
import { notAlike } from './alike.js';
import { profileOf } from './profile.js';
import type { UnderstoodRecord } from './understood-record.js';
import { fitOrNot } from './unfit-module.js';

/** What a heap of records comes to: the modules that something can be built on, and those that it can't. */
export interface ProfilesFound {
  /** In the order in which the modules first appear among the records. */
  readonly profiles: readonly ModuleProfile[];
  readonly unfit: readonly UnfitModule[];
}

/**
 * What records say of each of their modules, taken together. Several of one module may be given; which of them
 * gives what stands with `profileOf`. Modules may have been measured by different procedures: `requireAll` and
 * `alikeOnly` say what then.
 * @param today records older than a year are a concern.
 */
export function profilesOf(records: readonly UnderstoodRecord[], today: Date): ProfilesFound {
  const { modules, unfit } = byModule(records);
  const lines = comparableLines(modules.map(linesOf));
  const profiles: ModuleProfile[] = [];
  const not: UnfitModule[] = [];
  modules.forEach((module, index) => {
    const found = fitOrNot(module, lines[index]);
    if (found.kind === 'unfit') not.push(found.unfit);
    else profiles.push(profileOf(module, found.line, found.recommended, today));
  });
  return { profiles, unfit: [...not, ...unfit] };
}

/**
 * All modules, where something can be built on each of them, and alike on all.
 * @throws UnfitWishError where there are no records at all
 * @throws UnfitRecordsError naming every module that is in the way, those too that were measured by another
 * procedure than most
 */
export function requireAll(found: ProfilesFound): readonly ModuleProfile[] {
  const unfit = [...found.unfit, ...notAlike(found.profiles)];
  if (unfit.length > 0) throw new UnfitRecordsError(unfit);
  if (found.profiles.length === 0) {
    throw new UnfitWishError(
      'no records were given, so there are no modules to build with',
      'name the records of the modules, the folders that `railproof runs` lists',
    );
  }
  return found.profiles;
}

/**
 * The same without the modules that were measured by another procedure than most: they are unfit beside the
 * others, and say why. For whoever chooses among modules: give `selectModules` what comes from here.
 */
export function alikeOnly(found: ProfilesFound): ProfilesFound {
  const not = notAlike(found.profiles);
  const names = new Set(not.map(({ module }) => module));
  return {
    profiles: found.profiles.filter(({ name }) => !names.has(name)),
    unfit: [...found.unfit, ...not],
  };
}
