import { whyNoBallast } from '../analysis/group-ballast.js';
import { percent } from '../analysis/in-words.js';
import { type BallastWanted, smallestBallast } from '../circuit/ballast.js';
import { resistorRating } from '../circuit/resistor-rating.js';
import { type GroupModule, worstDissipation } from '../circuit/worst-sharing.js';
import type { Amperes, Ohms, Ratio } from '../quantity/quantity.js';
import type { ResistorChosen } from './build.js';
import type { ModuleProfile, Taken } from './module-profile.js';
import { mostCurrentOf } from './most-current.js';
import type { ParallelWish } from './parallel-build.js';
import { worstOf } from './worst-form.js';

/** What stands in each branch, before it is known what it has to bear. */
export type BallastTaken =
  | { readonly kind: 'resistor'; readonly resistance: Ohms }
  | { readonly kind: 'none' }
  | { readonly kind: 'impossible'; readonly why: string };

/** What the group may be asked for continuously in the worst case, with ballasts of that value. */
export function recommendedWith(
  profiles: readonly ModuleProfile[],
  resistance: Ohms,
  tolerance: Ratio,
): { readonly limit: Amperes; readonly by: string } {
  const of = profiles.map(({ name }) => ({ kind: 'module' as const, name }));
  return worstOf({ kind: 'group', of }, profiles, { resistance, tolerance });
}

/**
 * The ballast that was given, or the smallest of E12 (IEC 60063) that keeps the worst case within the imbalance
 * asked for at the load, and with which the group is recommended for that load, if there is any; where no load is
 * asked for, at what the group is recommended for with that very ballast.
 */
export function ballastFor(
  profiles: readonly ModuleProfile[],
  { ballast, tolerance }: ParallelWish,
  load: Amperes | undefined,
): BallastTaken {
  if (ballast.kind === 'given') return { kind: 'resistor', resistance: ballast.resistance };
  if (profiles.some(({ recommended }) => recommended.current <= 0)) return { kind: 'none' };
  const limitWith = (resistance: Ohms): Amperes => recommendedWith(profiles, resistance, tolerance).limit;
  const wanted: BallastWanted = {
    modules: profiles.map(asGroupModule),
    load: load ?? limitWith,
    imbalance: ballast.most,
    tolerance,
    series: 'E12',
  };
  // A larger one may let the group give more, though a smaller one shares evenly enough.
  const carrying =
    load === undefined
      ? undefined
      : smallestBallast({ ...wanted, isGood: (resistance) => limitWith(resistance) >= load });
  const isCarried = carrying?.kind === 'found' || carrying?.kind === 'unneeded';
  const outcome = isCarried ? carrying : smallestBallast(wanted);
  switch (outcome.kind) {
    case 'found':
      return { kind: 'resistor', resistance: outcome.value };
    case 'unneeded':
      return { kind: 'none' };
    case 'too-coarse':
    case 'too-costly':
      return {
        kind: 'impossible',
        why: whyNoBallast(outcome, { tolerance, asked: `where ${percent(ballast.most)} are asked for` }),
      };
  }
}

/** In the ends of their intervals, where those do not lie alike the further one. */
export function asGroupModule({ openCircuit, droop }: ModuleProfile): GroupModule {
  return { openCircuit: uncertain(openCircuit), droop: uncertain(droop) };
}

function uncertain({ value, interval: [low, high] }: Taken): GroupModule['droop'] {
  return { value, expanded: Math.max(0, high - value, value - low) };
}

/** What the resistor has to bear at that load of the group, and what to buy for it. */
export function chosenBallast(
  profiles: readonly ModuleProfile[],
  resistor: { readonly resistance: Ohms; readonly tolerance: Ratio },
  load: Amperes,
): { readonly kind: 'resistor' } & ResistorChosen {
  const { resistance, tolerance } = resistor;
  const modules = profiles.map(asGroupModule);
  const dissipation = load > 0 ? worstDissipation({ modules, load, ballast: resistance, tolerance }) : 0;
  const most = Math.max(...profiles.map((profile) => mostCurrentOf(profile).current));
  const dissipationAtLimit = most ** 2 * resistance * (1 + tolerance);
  return {
    kind: 'resistor',
    resistance,
    tolerance,
    dissipation,
    dissipationAtLimit,
    rating: resistorRating(dissipation, dissipationAtLimit),
    voltageCost: (resistance * load) / profiles.length,
  };
}
