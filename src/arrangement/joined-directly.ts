import { amps, givenPercent, percent } from '../analysis/in-words.js';
import type { DrawnBranch } from '../circuit/drawn-branch.js';
import type { WalkCorner } from '../circuit/share-walk.js';
import type { Amperes } from '../quantity/quantity.js';
import { usualSag } from './drawn-group.js';
import { bestPoints, extentOf, mostLoaded, wayUp } from './group-draws.js';
import { imbalanceAt } from './group-imbalance.js';
import { doesAtLimit, leavesGroup } from './limit-in-group.js';
import type { ModuleProfile } from './module-profile.js';
import type { WithoutBallast } from './parallel-build.js';
import type { KnownGroup } from './share-band.js';

/** Of the draws, before a module is called the one that carries most. */
const surely = 0.95;

/**
 * What the same modules do without any ballast: how unevenly they share at the load (or where they fail, if that
 * comes first), and what happens as the load rises, by the styles of their limits.
 */
export function joinedDirectly(
  profiles: readonly ModuleProfile[],
  group: KnownGroup,
  load: Amperes,
): WithoutBallast {
  const best = group.best.map(withoutResistor);
  const drawn = group.drawn.map(withoutResistor);
  const { end } = extentOf(drawn);
  const up = wayUp(best);
  const failsAt = Math.min(end.median, up.end.end);
  const at = Math.min(load, end.low * (1 - arithmetic), failsAt * (1 - arithmetic));
  const currents = bestPoints(best, [at])[0]?.branches.map(({ current }) => current) ?? [];
  const most = at > 0 ? mostLoaded(drawn, at).findIndex((share) => share >= surely) : -1;
  const hog = profiles[most]?.name;
  const imbalance = imbalanceAt(profiles, { drawn }, { load: at, ballast: undefined, currents });
  return {
    load: at,
    imbalance,
    hog,
    failsAt,
    story: [
      sharingSentence(profiles, { at, currents, hog }),
      ...storyOf(profiles, up.corners),
      endSentence(profiles, { failsAt, isSagged: up.corners.at(-1)?.branch === -1 }),
    ],
  };
}

const arithmetic = 1e-9;

function withoutResistor(branch: DrawnBranch): DrawnBranch {
  return { ...branch, ballast: new Float64Array(branch.ballast.length) };
}

function sharingSentence(
  profiles: readonly ModuleProfile[],
  { at, currents, hog }: { at: Amperes; currents: readonly Amperes[]; hog: string | undefined },
): string {
  const carried = profiles.map(({ name }, index) => `${name} ${amps(currents[index] ?? 0)}`).join(', ');
  const who =
    hog === undefined ? "which of them carries most can't be told from the records" : `${hog} carries most`;
  return `At ${amps(at)} they carry ${carried}: ${who}.`;
}

/** From limit to limit; those that are met at one and the same load are one fall. */
function storyOf(profiles: readonly ModuleProfile[], corners: readonly WalkCorner[]): readonly string[] {
  const limits = corners.filter(({ kind }) => kind === 'at-limit');
  return limits.flatMap(({ branch, load }, index): readonly string[] => {
    const profile = profiles[branch];
    if (profile === undefined) return [];
    const isLast = index === limits.length - 1 && corners.at(-1)?.branch === branch;
    const before = limits[index - 1];
    const falls = before !== undefined && load <= before.load * (1 + arithmetic);
    const driven = profiles[before?.branch ?? -1];
    const { name } = profile;
    if (falls && driven !== undefined && leavesGroup(driven)) {
      const limit = amps((profile.dropout ?? profile.usable).value);
      return [
        `That is more than the ${limit} of ${name}: it ${isLast ? 'goes as well' : doesAtLimit(profile)}.`,
      ];
    }
    if (isLast) return [`At ${amps(load)} ${name}, the last that held the bus, is at its limit.`];
    return [`At ${amps(load)} ${name} is at its limit and ${doesAtLimit(profile)}.`];
  });
}

function endSentence(
  profiles: readonly ModuleProfile[],
  { failsAt, isSagged }: { readonly failsAt: Amperes; readonly isSagged: boolean },
): string {
  const sum = profiles.reduce((total, { dropout, usable }) => total + (dropout ?? usable).value, 0);
  const sagged = `What is left could hold the bus only once it had fallen by more than ${givenPercent(usualSag)}, which is no holding. `;
  return failsAt < 0.95 * sum
    ? `${isSagged ? sagged : ''}So the group fails at about ${amps(failsAt)}, ${percent(failsAt / sum)} of the ${amps(sum)} that their limits add up to.`
    : `So the group fails at about ${amps(failsAt)}, when all are at their limits.`;
}
