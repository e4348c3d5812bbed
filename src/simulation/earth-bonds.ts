import type { SimulatedModule } from '../files/simulation-section.js';
import type { Ohms } from '../quantity/quantity.js';

/** A bond is a short piece of wire and two joints. */
const BOND: Ohms = 0.005;

/** Up to here an earth link carries what a module has to give; a leak above it carries next to nothing. */
const MOST_OF_A_BOND: Ohms = 1;

/** What an ohmmeter would find between a module's output 0 V and earth, everything else taken off. */
export function earthResistanceOf({ earth }: SimulatedModule): Ohms {
  switch (earth) {
    case 'bonded':
      return BOND;
    case 'isolated':
      return Number.POSITIVE_INFINITY;
    default:
      return Math.max(BOND, earth);
  }
}

/** The modules, by their place from the lowest, whose 0 V rail is bonded to earth. */
export function bondedPlaces(modules: readonly SimulatedModule[]): readonly number[] {
  return modules.flatMap((module, place) => (earthResistanceOf(module) <= MOST_OF_A_BOND ? [place] : []));
}

/**
 * What two bonds in a stack short between them: of each pair of neighbouring bonds the modules from the lower
 * one up to below the upper one, as half-open ranges of places. One bond alone does nothing.
 */
export function shortedSpans(
  modules: readonly SimulatedModule[],
): readonly (readonly [from: number, to: number])[] {
  const bonds = bondedPlaces(modules);
  return bonds.slice(1).map((to, index) => [bonds[index] ?? 0, to]);
}

/** The places of all modules that earth bonds short. */
export function shortedPlaces(modules: readonly SimulatedModule[]): ReadonlySet<number> {
  const spans = shortedSpans(modules);
  return new Set(
    [...modules.keys()].filter((place) => spans.some(([from, to]) => place >= from && place < to)),
  );
}
