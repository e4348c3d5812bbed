import { touchable } from '../circuit/touchable.js';
import type { Amperes, Volts } from '../quantity/quantity.js';
import type { ModuleProfile } from './module-profile.js';

/** A group that is to stand somewhere in one of the stacks. */
export interface PlacedGroup {
  readonly modules: readonly ModuleProfile[];
  readonly limit: Amperes;
}

/**
 * Spreads groups over alike stacks, each the lowest first; undefined where their isolation lets nobody do that.
 *
 * A group may stand at a place where its top, at the highest that all voltages allow, is no more than the least
 * that any of its outputs withstands to earth. Where that is not known, 60 V is what it may be taken to bear
 * (ES1; see `seriesStanding`). The lowest place needs none. Where all may stand anywhere, strong groups stand with
 * strong ones, so that all stacks but the weakest can give more than it; within a stack those with the better
 * isolation stand higher. Else those that may stand highest do.
 */
export function inStacks<G extends PlacedGroup>(
  groups: readonly G[],
  { stack, supplies }: { readonly stack: number; readonly supplies: number },
): readonly (readonly G[])[] | undefined {
  const highest = Math.max(...groups.map(topOf));
  const placed = groups.map((group) => ({ group, most: highestPlace(group, { highest, stack }) }));
  const strongFirst = placed.toSorted((one, other) => other.group.limit - one.group.limit);
  if (placed.every(({ most }) => most === stack - 1)) {
    return Array.from({ length: supplies }, (_, supply) =>
      strongFirst
        .slice(supply * stack, (supply + 1) * stack)
        .map(({ group }) => group)
        .sort((one, other) => knownIsolation(one) - knownIsolation(other)),
    );
  }
  const highFirst = strongFirst.toSorted((one, other) => other.most - one.most);
  const levels = Array.from({ length: stack }, (_, fromTop) =>
    highFirst.slice(fromTop * supplies, (fromTop + 1) * supplies),
  ).reverse();
  if (levels.some((level, place) => level.some(({ most }) => most < place))) return undefined;
  const sorted = levels.map((level) => level.toSorted((one, other) => other.group.limit - one.group.limit));
  return Array.from({ length: supplies }, (_, supply) =>
    sorted.flatMap((level) => level[supply]?.group ?? []),
  );
}

/**
 * Whether a drawer holds enough modules for each place, even if all below were of the lowest voltage that there is;
 * where not, no way to group them can be spread.
 */
export function mayBeStacked(
  modules: readonly ModuleProfile[],
  { group, stack, supplies }: { readonly group: number; readonly stack: number; readonly supplies: number },
): boolean {
  const alone = modules.map((module) => ({ modules: [module], limit: 0 }));
  const lowest = Math.min(...alone.map(topOf));
  const most = alone.map((each) => highestPlace(each, { highest: lowest, stack }));
  return Array.from({ length: stack }, (_, place) => place).every(
    (place) => most.filter((each) => each >= place).length >= group * supplies * (stack - place),
  );
}

/** The highest place, the lowest being 0, that a group's isolation bears. */
function highestPlace(
  group: PlacedGroup,
  { highest, stack }: { readonly highest: Volts; readonly stack: number },
): number {
  const bears = Math.min(
    ...group.modules.map(({ outputIsolation }) =>
      outputIsolation === 'unknown' ? touchable : outputIsolation,
    ),
  );
  const own = topOf(group);
  for (let place = stack - 1; place > 0; place -= 1) {
    if (place * highest + own <= bears) return place;
  }
  return 0;
}

/** Of its own voltage, the upper end. */
function topOf({ modules }: PlacedGroup): Volts {
  return Math.max(...modules.map(({ openCircuit }) => openCircuit.interval[1]));
}

/** Unknown counts as none. */
function knownIsolation({ modules }: PlacedGroup): Volts {
  return Math.min(
    ...modules.map(({ outputIsolation }) => (outputIsolation === 'unknown' ? 0 : outputIsolation)),
  );
}
