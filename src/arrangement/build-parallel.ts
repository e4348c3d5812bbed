import type { Amperes, Ratio } from '../quantity/quantity.js';
import { latinHypercube } from '../statistics/latin-hypercube.js';
import { randomFrom } from '../statistics/random.js';
import { type BallastTaken, ballastFor, chosenBallast } from './ballast-choice.js';
import type { Circuit, Estimate } from './build.js';
import { drawnGroup, withoutErrors } from './drawn-group.js';
import { firstToSaturate } from './first-to-saturate.js';
import { bestPoints, drawnAt, extentOf, wayUp } from './group-draws.js';
import { groupOf } from './group-form.js';
import { imbalanceAt } from './group-imbalance.js';
import { joinedDirectly } from './joined-directly.js';
import { failuresOf } from './module-lost.js';
import type { ModuleProfile } from './module-profile.js';
import type { ParallelBuild, ParallelWish, SharingAtLoad } from './parallel-build.js';
import { parallelCautions } from './parallel-cautions.js';
import { parallelParts } from './parallel-parts.js';
import { parallelStanding } from './parallel-standing.js';
import { requireSense } from './parallel-wish.js';
import { type KnownGroup, around, bandLoads, shareBand } from './share-band.js';
import { type WorstBallast, worstOf } from './worst-form.js';

/**
 * Of each error. The quantiles of the bands then lie within 2 % of their width of those that a hundred thousand
 * draws by plain chance give (test/reference/share-bands.test.ts).
 */
export const draws = 16_000;
const seed = 1;

/**
 * Modules side by side, worked out: how they share, with what ballast, how far the group goes and what it is
 * recommended for, what happens without ballast and when a module fails. The same records give the same answer;
 * modules in another order give it in that order. Of a group that may not be built, or of which that can't be
 * told, everything is given but the parts to buy. V, A, Ω, W.
 * @throws UnfitWishError for fewer than two modules, one that stands twice, a ballast, imbalance, tolerance or
 * load that is none.
 */
export function buildParallel(profiles: readonly ModuleProfile[], wish: ParallelWish): ParallelBuild {
  requireSense(profiles, wish);
  const form = groupOf(profiles);
  const sumOfSingles = {
    usable: sum(profiles.map(({ usable }) => usable.value)),
    recommended: sum(profiles.map(({ recommended }) => recommended.current)),
  };
  // What no ballast could ever make good must not choose it.
  const feasible = wish.load !== undefined && wish.load <= sumOfSingles.recommended ? wish.load : undefined;
  const taken = ballastFor(profiles, wish, feasible);
  const ballast = inBranch(taken, wish.tolerance);
  const worst = worstOf(form, profiles, ballast);
  const group: KnownGroup = {
    best: drawnGroup(profiles, ballast, withoutErrors),
    drawn: drawnGroup(profiles, ballast, latinHypercube(draws, randomFrom(seed))),
  };
  const extent = extentOf(group.drawn);
  const up = wayUp(group.best);
  const usable = usableOf(profiles, extent.usable, Math.min(up.end.end, up.end.ceiling));
  const load = loadOf(wish, worst.limit, usable);
  const chosen =
    taken.kind === 'resistor'
      ? chosenBallast(profiles, { resistance: taken.resistance, tolerance: wish.tolerance }, load.current)
      : taken;
  const { standing, concerns } = parallelStanding(profiles, wish, {
    ballast: chosen,
    recommended: worst.limit,
  });
  const setBy = profiles.find(({ name }) => name === worst.by)?.recommended;
  const circuit: Circuit = { form, ballast, reverseDiodes: false, orDiodes: false };
  return {
    kind: 'parallel',
    wish,
    modules: profiles,
    standing,
    concerns,
    load,
    ballast: chosen,
    sharing: shareBand(group, bandLoads(Math.min(up.end.end, usable.value), up.corners)),
    atLoad: sharingAt(profiles, group, { load: load.current, ballast }),
    firstToSaturate: firstToSaturate(profiles, extent, up),
    usable,
    recommended: {
      current: worst.limit,
      setBy: `${worst.by}, which would be the first above what it is recommended for${setBy === undefined ? '' : ` (${setBy.why})`}`,
    },
    sumOfSingles,
    withoutBallast: joinedDirectly(profiles, group, load.current),
    failures: failuresOf(profiles, group, { load: load.current, ballast }),
    circuit,
    parts: standing.kind === 'may-be-built' ? parallelParts(profiles, chosen) : [],
    cautions: parallelCautions(profiles, chosen),
  };
}

function inBranch(taken: BallastTaken, tolerance: Ratio): WorstBallast | undefined {
  return taken.kind === 'resistor' ? { resistance: taken.resistance, tolerance } : undefined;
}

/** The middle of what the draws say, and no more than the best estimate comes to. */
function usableOf(
  profiles: readonly ModuleProfile[],
  { median, low, high }: { readonly median: number; readonly low: number; readonly high: number },
  best: Amperes,
): Estimate {
  const value = Math.max(low, Math.min(median, best));
  const isOpen = profiles.some((profile) => profile.usable.bound === 'least');
  return { value, low, high, ...(isOpen ? { bound: 'least' } : {}) };
}

/** What is asked for, where the group holds that at all; else what it is recommended for, as then the load has to change. */
function loadOf(wish: ParallelWish, recommended: Amperes, usable: Estimate): ParallelBuild['load'] {
  return wish.load !== undefined && wish.load <= usable.low
    ? { current: wish.load, from: 'asked-for' }
    : { current: Math.min(recommended, usable.low), from: 'recommended' };
}

function sharingAt(
  profiles: readonly ModuleProfile[],
  group: KnownGroup,
  { load, ballast }: { readonly load: Amperes; readonly ballast: WorstBallast | undefined },
): SharingAtLoad {
  const [point] = bestPoints(group.best, [load]);
  const [drawn = []] = drawnAt(group.drawn, [load]);
  const currents = profiles.map((_, branch) => around(point?.branches[branch]?.current ?? 0, drawn[branch]));
  const share = (current: Amperes): Ratio => (load > 0 ? current / load : 0);
  return {
    busVoltage: around(point?.busVoltage ?? 0, drawn[profiles.length]),
    currents,
    shares: currents.map(({ value, low, high }) => ({
      value: share(value),
      low: share(low),
      high: share(high),
    })),
    imbalance: imbalanceAt(profiles, group, {
      load,
      ballast,
      currents: currents.map(({ value }) => value),
    }),
  };
}

function sum(values: readonly number[]): number {
  return values.reduce((total, value) => total + value, 0);
}
