import { touchable } from '../circuit/touchable.js';
import { formatExact } from '../quantity/format-quantity.js';
import type { Volts } from '../quantity/quantity.js';
import { UnfitWishError, type UnfitModule } from './arrangement-error.js';
import { assignmentOf, type Spread } from './assignment.js';
import { bestPackings, isBetter, type Packing } from './best-groups.js';
import { type Drawer, sortedDrawer } from './drawer.js';
import { ballastsFor, candidatesOf, choose } from './group-candidates.js';
import type { ModuleProfile } from './module-profile.js';
import { requireSharing } from './parallel-wish.js';
import { inStacks, mayBeStacked } from './places.js';
import { cautionsOf, circuitOf, modulesIn, partsOf, standingOfSupply } from './selected-supply.js';
import type { Selection, SelectionWish } from './selection.js';
import { marginOf } from './selection-margin.js';
import { standingOf } from './standing-of.js';

/** A module is a bit of a number. */
const mostModules = 30;
/** Groups that are weighed, each with every ballast. */
const mostGroups = 2000;

/**
 * The best way to make so many alike supplies, each a stack of groups, out of a drawer: the one whose weakest
 * supply may be asked for most continuously in the worst case that the records allow; of equal ones the one
 * whose worst group shares best. All ballasts are of one value, the smallest that does for all groups (or the one
 * that was given). The way is found exactly, see `bestPackings`, and the same drawer in another order gives the same.
 *
 * The next best is of the same voltage, and differs in which modules stand side by side; where they stand alone, in
 * which are taken.
 *
 * On a shared machine of two cores 20 modules in pairs take up to 4 s, 18 in threes 2 s, 16 in fours 5 s. What is larger
 * is refused: at once where there are more than `mostModules` or `mostGroups`, or after about ten seconds where so
 * many are so nearly alike that no best way was found.
 * @throws UnfitWishError for numbers that are no counts, a ballast that is none, and a drawer that is too large.
 */
export function selectModules(
  found: { readonly profiles: readonly ModuleProfile[]; readonly unfit: readonly UnfitModule[] },
  wish: SelectionWish,
): Selection {
  requireSense(wish);
  const drawer = sortedDrawer(found, wish);
  const each = drawer.byVoltage.map(({ modules }) => waysOf(modules, wish));
  const [of] = each.toSorted((one, other) => better(one.best, other.best));
  const { best, next } = of ?? { best: undefined, next: undefined };
  const considered = each.reduce((sum, { considered: ways }) => sum + ways, 0);
  const common = {
    kind: 'selection' as const,
    wish,
    modules: found.profiles,
    considered,
    leftOut: [...drawer.leftOut, ...ofOtherVoltages(drawer, best)],
  };
  if (best === undefined) {
    return {
      ...common,
      standing: { kind: 'cannot-tell', because: whatIsMissing(drawer, wish) },
      concerns: [],
      best: undefined,
      next: undefined,
      margin: undefined,
      unused: drawer.byVoltage.flatMap(({ modules }) => modules.map(({ name }) => name)),
      circuit: undefined,
      parts: [],
      cautions: [],
    };
  }
  const wished = { ...wish, resistance: best.resistance };
  const [first = []] = best.supplies;
  const judged = best.supplies.map((supply) => standingOfSupply(supply, wished));
  const concerns = judged.flatMap((supply) => supply.concerns);
  const standings = judged.flatMap((supply) => supply.standings);
  const said = (kind: 'must-not-be-built' | 'cannot-tell'): readonly string[] =>
    standings.flatMap((standing) => (standing.kind === kind ? standing.because : []));
  const standing = standingOf({
    refusals: said('must-not-be-built'),
    doubts: said('cannot-tell'),
    concerns,
  });
  return {
    ...common,
    standing,
    concerns,
    best: assignmentOf(best, wish.tolerance),
    next: next === undefined ? undefined : assignmentOf(next, wish.tolerance),
    margin: next === undefined ? undefined : marginOf(best, next, wish.tolerance),
    unused: unusedOf(drawer, best),
    circuit: circuitOf(first, wished),
    parts: standing.kind === 'may-be-built' ? partsOf(best.supplies, wished) : [],
    cautions: cautionsOf(best.supplies, wished),
  };
}

function requireSense(wish: SelectionWish): void {
  const counts = [
    ['modules side by side', wish.group],
    ['groups in a stack', wish.stack],
    ['supplies', wish.supplies],
  ] as const;
  for (const [what, count] of counts) {
    if (!(Number.isInteger(count) && count >= 1)) {
      throw new UnfitWishError(`${count} ${what} can't be had`, 'Wish for a whole number, 1 at least.');
    }
  }
  if (wish.group > 1) requireSharing(wish);
}

/** The best two ways with the modules of one voltage, and how many ways there are. */
function waysOf(
  modules: readonly ModuleProfile[],
  wish: SelectionWish,
): { readonly best: Spread | undefined; readonly next: Spread | undefined; readonly considered: number } {
  const { group, stack, supplies } = wish;
  const count = stack * supplies;
  if (modules.length < group * count) return { best: undefined, next: undefined, considered: 0 };
  const groups = choose(modules.length, group);
  if (modules.length > mostModules || groups > mostGroups) {
    throw new UnfitWishError(
      `${modules.length} modules give ${groups} groups of ${group}, more than can be compared (${mostModules} modules, ${mostGroups} groups)`,
      'Give the records of fewer modules.',
    );
  }
  const considered = countWays(modules.length, group, count);
  if (!mayBeStacked(modules, wish)) return { best: undefined, next: undefined, considered };
  const ballasts = ballastsFor(wish);
  const candidates = candidatesOf(modules, wish, ballasts);
  const spreadOf = (packing: Packing): Spread | undefined => {
    const placed = packing.groups.map((index) => {
      const { members = 0, worths = [] } = candidates[index] ?? {};
      return {
        modules: modules.filter((_, place) => (members & (1 << place)) !== 0),
        limit: worths[packing.ballast]?.limit ?? 0,
      };
    });
    const spread = inStacks(placed, { stack, supplies });
    const { limit, imbalance } = packing;
    return spread && { supplies: spread, resistance: ballasts[packing.ballast] ?? 0, limit, imbalance };
  };
  const { best, next } = bestPackings(candidates, {
    count,
    isBuildable: (packing) => spreadOf(packing) !== undefined,
  });
  return {
    best: best && spreadOf(best),
    next: next && spreadOf(next),
    considered,
  };
}

/** For sorting, the better one first; what there is none of comes last. */
function better(one: Spread | undefined, other: Spread | undefined): number {
  if (one === undefined || other === undefined)
    return Number(one === undefined) - Number(other === undefined);
  return Number(isBetter(other, one)) - Number(isBetter(one, other));
}

/** Ways to take so many groups of a size out of so many modules, in whatever order. */
function countWays(modules: number, size: number, count: number): number {
  let ways = 1;
  for (let taken = 0; taken < count; taken += 1) {
    ways = (ways * choose(modules - taken * size, size)) / (taken + 1);
  }
  return Math.round(ways);
}

function whatIsMissing(
  { byVoltage }: Drawer,
  { group, stack, supplies, ballast }: SelectionWish,
): readonly string[] {
  const needed = group * stack * supplies;
  if (byVoltage.length === 0) {
    return [
      `${needed} ${needed === 1 ? 'module is' : 'modules are'} needed, and there is none that can be used.`,
    ];
  }
  return byVoltage.map(({ voltage, modules }) => {
    const there = modules.length;
    const of = `with ${inVolts(voltage)} on the label`;
    if (there < needed) {
      return `${needed} modules are needed, and ${there} ${of} can be used: ${needed - there} more ${needed - there === 1 ? 'is' : 'are'} missing.`;
    }
    return group > 1 && ballast.kind === 'for-imbalance'
      ? `Of the ${there} modules ${of} no choice shares as evenly as is wished, or bears its place in the stack: allow a larger imbalance, or take closer resistors.`
      : `Of the ${there} modules ${of} no choice bears its place in the stack: what their outputs withstand to earth is too little, or not known, and then no more than ${touchable} V is relied on.`;
  });
}

function ofOtherVoltages({ byVoltage }: Drawer, best: Spread | undefined): Selection['leftOut'] {
  const voltage = voltageOf(best);
  if (voltage === undefined) return [];
  return byVoltage
    .filter((each) => each.voltage !== voltage)
    .flatMap((each) =>
      each.modules.map(({ name }) => ({
        module: name,
        why: `its label says ${inVolts(each.voltage)}, and the best is made of modules of ${inVolts(voltage)}; to choose among those of ${inVolts(each.voltage)} give their records only`,
      })),
    );
}

function unusedOf({ byVoltage }: Drawer, best: Spread): readonly string[] {
  const used = new Set(best.supplies.flatMap(modulesIn));
  return byVoltage
    .filter(({ voltage }) => voltage === voltageOf(best))
    .flatMap(({ modules }) => modules.filter((module) => !used.has(module)).map(({ name }) => name));
}

function voltageOf(spread: Spread | undefined): Volts | undefined {
  return spread?.supplies[0]?.[0]?.modules[0]?.label.voltage;
}

function inVolts(voltage: Volts): string {
  const { value, unit } = formatExact(voltage, 'voltage');
  return `${value} ${unit}`;
}
