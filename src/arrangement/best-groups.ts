import { UnfitWishError } from './arrangement-error.js';

/** A group that could be made, and what it is worth with each of the ballasts that are thought of. */
export interface Candidate {
  /** Its modules, each a bit. */
  readonly members: number;
  /** By ballast, the smallest first; undefined where that ballast does not do for this group. */
  readonly worths: readonly (Worth | undefined)[];
}

export interface Worth {
  readonly limit: number;
  readonly imbalance: number;
}

/** So many groups without a module in two of them, all with the one ballast. */
export interface Packing extends Worth {
  /** Places in the list of candidates, rising. */
  readonly groups: readonly number[];
  readonly ballast: number;
}

/** Groups looked at before it is given up: some ten seconds. */
const mostLooks = 5e7;
/** What it costs to ask whether a way can be built, in looks. */
const asking = 50;

/**
 * The best of all ways to take `count` groups out of a drawer, and the best of all others. The better one has the
 * higher least limit of its groups; where those are equal the smaller largest imbalance; and of equal ones the
 * first that is met counts, in an order that depends on nothing but the list. Each way is taken with the smallest
 * ballast that does for all of its groups, which is what a builder buys.
 *
 * Exact, by branch and bound. Of the groups of a way at least one, its anchor, is done for by this ballast and
 * not by the next smaller one. The ways are gone through by their anchors, the ones of the highest limit first:
 * no way is worth more than its anchor, so when an anchor is worth less than the next best way, all is known. Within,
 * groups are added in the order of the list and dropped as soon as what there is falls behind the next best, or
 * as too few modules are left.
 *
 * @param candidates all with the same number of modules, by rising lowest bit.
 * @param isBuildable whether a way that is complete can be built; asked for those only that are good enough.
 * @throws UnfitWishError where that takes too long.
 */
export function bestPackings(
  candidates: readonly Candidate[],
  { count, isBuildable }: { readonly count: number; readonly isBuildable: (packing: Packing) => boolean },
): { readonly best: Packing | undefined; readonly next: Packing | undefined } {
  const size = bitsOf(candidates[0]?.members ?? 0);
  const all = candidates.reduce((modules, { members }) => modules | members, 0);
  const choices = candidates.reduce((most, { worths }) => Math.max(most, worths.length), 0);
  const byBallast = Array.from({ length: choices }, (_, ballast) => choicesFor(candidates, ballast));
  let best: Packing | undefined;
  let next: Packing | undefined;
  let looks = 0;
  let complete = 0;

  const take = (packing: Packing): void => {
    complete += 1;
    if (!isSmallest(packing, candidates)) return;
    looks += asking;
    if (!isBuildable(packing)) return;
    if (best === undefined || isBetter(packing, best)) [best, next] = [packing, best];
    else next = packing;
  };

  /** All ways that go on from these groups with choices from `from` on. */
  const extend = (packing: Packing, { used, closed, from, anchor, dead }: Way): void => {
    const { groups, ballast } = packing;
    if (groups.length === count) {
      take({ ...packing, groups: groups.toSorted((one, other) => one - other) });
      return;
    }
    // What is still to be had depends on the modules that are left alone: where it came to nothing, it does again.
    const left = all & ~(used | closed);
    if (dead.covers(groups.length, left, packing)) return;
    const before = complete;
    const needed = size * (count - groups.length);
    const list = byBallast[ballast] ?? [];
    for (let place = from; place < list.length; place += 1) {
      const choice = list[place];
      looks += 1;
      if (choice === undefined || (choice.members & used) !== 0) continue;
      const { index, members, worth } = choice;
      // Each way once: its anchor is the first of those that could be.
      if (index < anchor && choice.isAnchor) continue;
      const below = lowestBitOf(members) - 1;
      if (bitsOf(left & ~below) < needed) break;
      const joined = {
        limit: Math.min(packing.limit, worth.limit),
        imbalance: Math.max(packing.imbalance, worth.imbalance),
      };
      if (next !== undefined && !isBetter(joined, next)) continue;
      extend(
        { ...joined, ballast, groups: [...groups, index] },
        { used: used | members, closed: closed | below, from: place + 1, anchor, dead },
      );
    }
    if (looks > mostLooks) throw tooLong();
    if (complete === before) dead.add(groups.length, left, packing);
  };

  for (const { index: anchor, members: used, ballast, worth } of anchorsOf(byBallast)) {
    if (next !== undefined && worth.limit < next.limit) break;
    if (next !== undefined && !isBetter(worth, next)) continue;
    const dead = new DeadEnds();
    extend({ ...worth, ballast, groups: [anchor] }, { used, closed: 0, from: 0, anchor, dead });
  }
  return { best, next };
}

interface Way {
  /** Modules that are in its groups, each a bit, … */
  readonly used: number;
  /** … and those below the last group's lowest, which no group to come can hold. */
  readonly closed: number;
  readonly from: number;
  readonly anchor: number;
  readonly dead: DeadEnds;
}

/**
 * Where no way could be completed that is better than the next best, which only ever gets better: nor can it be
 * from the same modules by groups that are worth no more.
 */
class DeadEnds {
  readonly #byCount: Map<number, Worth>[] = [];

  covers(count: number, left: number, { limit, imbalance }: Worth): boolean {
    const worth = this.#byCount[count]?.get(left);
    return worth !== undefined && limit <= worth.limit && imbalance >= worth.imbalance;
  }

  add(count: number, left: number, { limit, imbalance }: Worth): void {
    const known = (this.#byCount[count] ??= new Map<number, Worth>());
    known.set(left, { limit, imbalance });
  }
}

/** A candidate with one ballast. */
interface Choice {
  readonly index: number;
  readonly members: number;
  readonly ballast: number;
  readonly worth: Worth;
  /** Done for by this ballast, and not by the next smaller one. */
  readonly isAnchor: boolean;
}

function choicesFor(candidates: readonly Candidate[], ballast: number): readonly Choice[] {
  return candidates.flatMap(({ members, worths }, index) => {
    const worth = worths[ballast];
    const isAnchor = worths[ballast - 1] === undefined;
    return worth === undefined ? [] : [{ index, members, ballast, worth, isAnchor }];
  });
}

function anchorsOf(byBallast: readonly (readonly Choice[])[]): readonly Choice[] {
  return byBallast
    .flat()
    .filter(({ isAnchor }) => isAnchor)
    .sort((one, other) => other.worth.limit - one.worth.limit || one.worth.imbalance - other.worth.imbalance);
}

/** The higher limit, or with the same limit the smaller imbalance. */
export function isBetter(one: Worth, other: Worth): boolean {
  return one.limit > other.limit || (one.limit === other.limit && one.imbalance < other.imbalance);
}

/** Whether no smaller ballast does for all of them. */
function isSmallest({ groups, ballast }: Packing, candidates: readonly Candidate[]): boolean {
  for (let smaller = 0; smaller < ballast; smaller += 1) {
    if (groups.every((group) => candidates[group]?.worths[smaller] !== undefined)) return false;
  }
  return true;
}

function bitsOf(modules: number): number {
  let count = 0;
  for (let left = modules; left !== 0; left &= left - 1) count += 1;
  return count;
}

function lowestBitOf(modules: number): number {
  return modules & -modules;
}

function tooLong(): UnfitWishError {
  return new UnfitWishError(
    'so many of the modules are so nearly alike that the best way to group them takes too long to find',
    'Give the records of fewer modules, or wish for fewer supplies at a time.',
  );
}
