import { listed } from '../quantity/listed.js';
import type { UnfitModule } from './arrangement-error.js';
import type { ModuleProfile } from './module-profile.js';

/**
 * The modules whose line was measured by another procedure than that of most: how long a point was held, how far
 * a search went and what counted as a sag may differ, and then so do numbers of equal modules. Where two
 * procedures are as common, the one that met more limits counts, then the one of the first module.
 */
export function notAlike(profiles: readonly ModuleProfile[]): readonly UnfitModule[] {
  const procedures = [...new Set(profiles.map(procedureOf))];
  const by = (procedure: string): readonly ModuleProfile[] =>
    profiles.filter((profile) => procedureOf(profile) === procedure);
  const [common, ...others] = procedures.toSorted(
    (one, other) => by(other).length - by(one).length || limitsMet(by(other)) - limitsMet(by(one)),
  );
  if (common === undefined || others.length === 0) return [];
  const names = by(common).map(({ name }) => name);
  return profiles
    .filter((profile) => procedureOf(profile) !== common)
    .map((profile) => ({
      module: profile.name,
      why: `it was measured by ${procedureOf(profile)}, ${listed(names)} by ${common}: their numbers don't compare`,
      advice: `run the same procedure on all of them: ${common} on ${profile.name}, for one`,
    }));
}

function procedureOf({ droop }: ModuleProfile): string {
  return droop.from.procedure;
}

function limitsMet(profiles: readonly ModuleProfile[]): number {
  return profiles.filter(({ usable }) => usable.bound === undefined).length;
}
