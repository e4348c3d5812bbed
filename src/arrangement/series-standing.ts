import { ratedAmperes } from '../analysis/in-words.js';
import { touchable } from '../circuit/touchable.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes } from '../quantity/quantity.js';
import { roundedDown } from '../quantity/rounded-down.js';
import type { Concern, Standing } from './build.js';
import type { ModuleProfile } from './module-profile.js';
import { railVolts, railVoltsAtMost } from './rails.js';
import type { Rail } from './series-build.js';
import { standingOf } from './standing-of.js';

/** A module in its place, the lowest being 0. */
interface Placed {
  readonly profile: ModuleProfile;
  readonly place: number;
  readonly rail: Rail;
}

/**
 * Whether a string may be built, and what else its builder must know.
 *
 * Refused: a module whose output is bonded to earth or leaks to it, wherever it stands; one whose isolation
 * does not bear its place; one that its records recommend for nothing; a load above what is recommended. A
 * module whose earth was never measured, or could not be told, can't be decided on; nor can one that is fed with DC,
 * as isolation is measured with nothing at its input.
 *
 * Where nobody knows what an output withstands to earth, 60 V decide (ES1 of IEC 62368-1). Up to there an
 * output that has been shown to be isolated may float: should it give way, what lies below it is shorted
 * through earth, and nobody can touch more than what is safe to touch. That weakens the build, and is said. Beyond,
 * somebody's life hangs on that insulation, and it can't be told.
 */
export function seriesStanding(
  profiles: readonly ModuleProfile[],
  found: { readonly rails: readonly Rail[]; readonly recommended: Amperes; readonly load: Amperes },
): { readonly standing: Standing; readonly concerns: readonly Concern[] } {
  const placed = found.rails.flatMap((rail, place): readonly Placed[] => {
    const profile = profiles[place];
    return profile === undefined ? [] : [{ profile, place, rail }];
  });
  const concerns = [...profiles.flatMap((profile) => profile.concerns), ...placed.flatMap(isolationConcerns)];
  const refusals = [...placed.flatMap(refusalsOf), ...tooMuch(found)];
  return { standing: standingOf({ refusals, doubts: placed.flatMap(doubtsOf), concerns }), concerns };
}

function refusalsOf({ profile, place, rail }: Placed): readonly string[] {
  const { name, earth } = profile;
  const refusals: string[] = [];
  if (earth?.relation === 'bonded') refusals.push(place === 0 ? bondedLowest(name) : bondedAbove(name, rail));
  if (earth?.relation === 'leaky') {
    refusals.push(
      `${name} leaks to earth: its output is neither cut off from earth nor tied to it, so what its insulation bears is anybody's guess. Leave it out of any string, and find out what joins it to earth.`,
    );
  }
  if (rail.verdict === 'beyond' && rail.isolation !== 'unknown') {
    refusals.push(
      `${name} would stand at up to ${railVoltsAtMost(rail.top.high)} above earth, and its output withstands ${formatQuantity(rail.isolation, 'voltage')}. Put it lower in the string, or leave it out.`,
    );
  }
  if (profile.recommended.current <= 0) {
    refusals.push(`${name} is recommended for nothing by its records: ${profile.recommended.why}.`);
  }
  return refusals;
}

function bondedAbove(name: string, { float }: Rail): string {
  return `The output of ${name} is bonded to earth inside, and would have to stand ${railVolts(float.value)} above the string's 0 V: what lies below it would be shorted through earth. Leave it out. Taking a bond out takes away a protection: local codes and a licensed person decide, and isolation must be run again.`;
}

function bondedLowest(name: string): string {
  return `The output of ${name} is bonded to earth inside. Only at the lowest place does that short nothing: its bond would then earth the string's 0 V, and no other point may be earthed. Even so the string is refused, as one earthed by a bond that nobody chose is earthed twice as soon as somebody earths it. Take a module that is isolated, and earth the string on purpose at one point.`;
}

function tooMuch({
  load,
  recommended,
}: {
  readonly load: Amperes;
  readonly recommended: Amperes;
}): readonly string[] {
  return load > recommended && recommended > 0
    ? [
        `${ratedAmperes(load)} is asked for, and ${roundedDown(recommended, 'current')} is the most that the string is recommended for. Ask for less, or put a stronger module for the weakest.`,
      ]
    : [];
}

function doubtsOf({ profile }: Placed): readonly string[] {
  const { name, earth, input } = profile;
  const doubts: string[] = [];
  if (earth === undefined) {
    doubts.push(`How the output of ${name} stands to earth was never measured: run isolation on ${name}.`);
  }
  if (earth?.relation === 'undetermined') {
    doubts.push(
      `How the output of ${name} stands to earth could not be told: run isolation on ${name} again, unplugged and with good contacts.`,
    );
  }
  if (input === 'dc') {
    doubts.push(
      `${name} is fed with DC, and no record shows that its output is cut off from its input: where it is not, what feeds it joins its 0 V to that of the others that it feeds, and shorts what stands between. Find out, or take modules that are fed from the mains.`,
    );
  }
  return doubts;
}

function isolationConcerns({ profile, rail }: Placed): readonly Concern[] {
  return rail.verdict === 'unknown' ? [isolationUnknown(profile.name, rail.top)] : [];
}

/** Of a module that would stand so high above earth, nobody knowing what its output bears. */
export function isolationUnknown(module: string, top: Rail['top']): Concern {
  const isBeyond = top.high > touchable;
  const beyond = isBeyond ? `, beyond the ${touchable} V DC that are safe to touch` : '';
  return {
    kind: 'isolation-unknown',
    module,
    run: undefined,
    weight: isBeyond ? 'hinders' : 'weakens',
    text: `it would stand at up to ${railVoltsAtMost(top.high)} above earth${beyond}, and nobody knows what its output withstands: find out, and write it into its module file as output-isolation`,
  };
}
