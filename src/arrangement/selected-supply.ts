import { listed } from '../quantity/listed.js';
import type { Ohms } from '../quantity/quantity.js';
import { chosenBallast } from './ballast-choice.js';
import { bondsOf } from './bonds.js';
import type { Circuit, Concern, Form, Part, Standing } from './build.js';
import { groupOf } from './group-form.js';
import { moduleParts } from './module-parts.js';
import type { ModuleProfile, Taken } from './module-profile.js';
import type { ParallelBuild } from './parallel-build.js';
import { parallelCautions } from './parallel-cautions.js';
import { ballastParts, parallelParts } from './parallel-parts.js';
import { parallelStanding } from './parallel-standing.js';
import type { PlacedGroup } from './places.js';
import { railsOf, type Stacked } from './rails.js';
import { formDiodesOf } from './reverse-diodes.js';
import type { Rail } from './series-build.js';
import type { SelectionWish } from './selection.js';
import { seriesCautions } from './series-cautions.js';
import { seriesParts } from './series-parts.js';
import { isolationUnknown } from './series-standing.js';

/** Groups of one supply, the lowest first. */
export type Supply = readonly PlacedGroup[];

/** What a supply is wished with, and the ballast that was chosen for all. */
export type Wished = Pick<SelectionWish, 'ballast' | 'tolerance'> & { readonly resistance: Ohms };

/** What is drawn of a supply. */
export function circuitOf(supply: Supply, { resistance, tolerance }: Wished): Circuit {
  const groups: readonly Form[] = supply.map(({ modules }) => groupOf(modules));
  const [first] = groups;
  const isStack = first === undefined || groups.length > 1;
  return {
    form: isStack ? { kind: 'stack', of: groups } : first,
    ballast: resistance > 0 ? { resistance, tolerance } : undefined,
    reverseDiodes: isStack,
    orDiodes: false,
  };
}

/** What is bought for all supplies: the marks of one go on where those of the one before it end. */
export function partsOf(supplies: readonly Supply[], wished: Wished): readonly Part[] {
  return supplies.flatMap((supply, index) =>
    partsOfOne(supply, wished, supplies.slice(0, index).flatMap(modulesIn).length),
  );
}

/** What its groups need and, where they stand upon each other, a diode across each module. */
function partsOfOne(supply: Supply, wished: Wished, after: number): readonly Part[] {
  const modules = modulesIn(supply);
  const [first, ...others] = supply;
  if (first === undefined) return [];
  if (others.length === 0) {
    return first.modules.length > 1
      ? parallelParts(first.modules, worstBallast(supply, wished), after)
      : moduleParts(modules);
  }
  return [
    ...seriesParts(modules, formDiodesOf(circuitOf(supply, wished).form, modules), after),
    ...ballastParts(modules, worstBallast(supply, wished), after),
  ];
}

/** What whoever builds them must know: what holds for all once, the rest with the modules that it is of. */
export function cautionsOf(supplies: readonly Supply[], wished: Wished): readonly string[] {
  const each = supplies.map((supply) => ({ supply, cautions: cautionsOfOne(supply, wished) }));
  const ofAll = (caution: string): boolean => each.every(({ cautions }) => cautions.includes(caution));
  const common = (each[0]?.cautions ?? []).filter(ofAll);
  const own = each.flatMap(({ supply, cautions }) => {
    const names = listed(modulesIn(supply).map(({ name }) => name));
    return cautions.filter((caution) => !ofAll(caution)).map((caution) => `${names}: ${caution}`);
  });
  return [...common, ...own];
}

function cautionsOfOne(supply: Supply, wished: Wished): readonly string[] {
  const ofGroups = supply
    .filter(({ modules }) => modules.length > 1)
    .flatMap(({ modules }) => parallelCautions(modules, worstBallast(supply, wished)));
  const rails = railsIn(supply);
  const ofStack = supply.length > 1 ? seriesCautions(rails, bondsOf(rails)) : [];
  const alone = [
    'The module is fed from the mains: its case stays closed, and its output is proved dead with a meter before anything is wired.',
  ];
  return [...new Set([...ofStack, ...ofGroups, ...(ofStack.length + ofGroups.length === 0 ? alone : [])])];
}

/** What hinders or weakens a supply. Its modules have been sorted, so of how they stand to earth nothing is left to refuse. */
export function standingOfSupply(
  supply: Supply,
  wished: Wished,
): { readonly standings: readonly Standing[]; readonly concerns: readonly Concern[] } {
  const rails = railsIn(supply);
  const groups = supply
    .filter(({ modules }) => modules.length > 1)
    .map(({ modules, limit }) =>
      parallelStanding(
        modules,
        { ...wished, load: undefined },
        { ballast: worstBallast(supply, wished), recommended: limit },
      ),
    );
  return {
    standings: groups.map(({ standing }) => standing),
    concerns: [
      ...modulesIn(supply).flatMap(({ concerns }) => concerns),
      ...supply.slice(1).flatMap(({ modules }, index) => unknownIn(modules, rails[index + 1])),
      ...groups.flatMap(({ concerns }) => concerns.filter(({ kind }) => kind === 'of-little-use')),
    ],
  };
}

function unknownIn(modules: readonly ModuleProfile[], rail: Rail | undefined): readonly Concern[] {
  if (rail === undefined) return [];
  return modules
    .filter(({ outputIsolation }) => outputIsolation === 'unknown')
    .map(({ name }) => isolationUnknown(name, rail.top));
}

export function modulesIn(supply: Supply): readonly ModuleProfile[] {
  return supply.flatMap(({ modules }) => modules);
}

/** One value for all; of the group in which it has to bear most. */
function worstBallast(supply: Supply, { resistance, tolerance }: Wished): ParallelBuild['ballast'] {
  if (resistance === 0) return { kind: 'none' };
  const each = supply.map(({ modules, limit }) => chosenBallast(modules, { resistance, tolerance }, limit));
  const worst = each.toSorted((one, other) => other.dissipation - one.dissipation).at(0);
  if (worst === undefined) return { kind: 'none' };
  const atLimit = Math.max(...each.map(({ dissipationAtLimit }) => dissipationAtLimit));
  const ratings = each.map(({ rating }) => rating);
  return {
    ...worst,
    dissipationAtLimit: atLimit,
    rating: ratings.includes(undefined) ? undefined : Math.max(...ratings.map((rating = 0) => rating)),
  };
}

function railsIn(supply: Supply): readonly Rail[] {
  return railsOf(supply.map(({ modules }) => asOne(modules)));
}

/** A group as it stands in a stack: its open voltage lies between the lowest and the highest of its modules. */
function asOne(modules: readonly ModuleProfile[]): Stacked {
  const [first, ...others] = modules;
  if (first === undefined) throw new RangeError('a group of no modules');
  if (others.length === 0) return first;
  const voltages = modules.map(({ openCircuit }) => openCircuit);
  const low = Math.min(...voltages.map(({ interval }) => interval[0]));
  const high = Math.max(...voltages.map(({ interval }) => interval[1]));
  const openCircuit: Taken = {
    ...first.openCircuit,
    value: Math.max(...voltages.map(({ value }) => value)),
    interval: [low, high],
    budget: [],
  };
  const isolations = modules.map(({ outputIsolation }) => outputIsolation);
  return {
    name: listed(modules.map(({ name }) => name)),
    openCircuit,
    outputIsolation: isolations.includes('unknown')
      ? 'unknown'
      : Math.min(...isolations.map((isolation) => (isolation === 'unknown' ? 0 : isolation))),
  };
}
