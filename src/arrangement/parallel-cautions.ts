import { amps } from '../analysis/in-words.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import { listed } from '../quantity/listed.js';
import type { Amperes } from '../quantity/quantity.js';
import type { ModuleProfile } from './module-profile.js';
import { mostCurrentOf } from './most-current.js';
import type { ParallelBuild } from './parallel-build.js';

/** What whoever builds a group must know, a sentence or two each; the heaviest first. */
export function parallelCautions(
  profiles: readonly ModuleProfile[],
  ballast: ParallelBuild['ballast'],
): readonly string[] {
  const others = profiles.map((profile) =>
    profiles.reduce((sum, other) => (other === profile ? sum : sum + mostCurrentOf(other).current), 0),
  );
  return [
    'The modules are fed from the mains: their cases stay closed, all are unplugged before anything is wired, and outputs are proved dead with a meter first, as capacitors hold their charge.',
    'Before outputs are joined, each is proved to have the same polarity and its own voltage: an output joined the wrong way round shorts all the others.',
    ...earthCautions(profiles),
    ...heatCautions(ballast, Math.max(...others)),
    ballast.kind === 'resistor'
      ? 'What lies between a module and the common joint counts as ballast: make the leads before the joint alike in length and cross-section, and join all of them at one point.'
      : 'Without ballast the leads decide who carries what: make them alike in length and cross-section, and join all of them at one point.',
    `The lead of a module must bear what all the others push into it when it fails, up to ${amps(Math.max(...others))}; the common leads bear the load of the whole group.`,
    'No diode across an output is needed in a group that stands alone: nothing there drives an output backwards. In a stack each group needs them.',
    'All are switched on and off together, from one switched supply: one that starts alone is at its limit at once under load.',
    'Local codes and a licensed person decide what may be joined to the mains and to earth, and how.',
  ];
}

function earthCautions(profiles: readonly ModuleProfile[]): readonly string[] {
  const names = (is: (profile: ModuleProfile) => boolean): readonly string[] =>
    profiles.filter(is).map(({ name }) => name);
  const bonded = names(({ earth }) => earth?.relation === 'bonded');
  const leaky = names(({ earth }) => earth?.relation === 'leaky');
  const unknown = names(({ earth }) => earth === undefined || earth.relation === 'undetermined');
  const [one, ...more] = bonded;
  return [
    ...(one !== undefined && more.length === 0
      ? [
          `The output of ${one} is bonded to earth inside, and with it that of the whole group: nothing else may tie its 0 V to earth.`,
        ]
      : []),
    ...(more.length > 0
      ? [
          `The outputs of ${listed(bonded)} are bonded to earth inside. Their 0 V are joined anyway, so nothing is shorted; but the bonds and the earth conductors close a loop, and a part of the load current returns through it. Taking a bond out takes away a protection: local codes and a licensed person decide.`,
        ]
      : []),
    ...(leaky.length > 0
      ? [
          `${listed(leaky)} ${leaky.length > 1 ? 'leak' : 'leaks'} to earth, and so does the whole group then: find out what joins the output to earth before it is used.`,
        ]
      : []),
    ...(unknown.length > 0
      ? [
          `How the ${unknown.length > 1 ? 'outputs' : 'output'} of ${listed(unknown)} ${unknown.length > 1 ? 'stand' : 'stands'} to earth is not known: reckon with the group's 0 V being earthed, and run isolation.`,
        ]
      : []),
  ];
}

/** @param pushed the most that the others push into a module whose output is shorted, through its ballast. */
function heatCautions(ballast: ParallelBuild['ballast'], pushed: Amperes): readonly string[] {
  if (ballast.kind !== 'resistor') return [];
  const watts = (power: number): string => formatQuantity(power, 'power', { significant: 2 });
  const { resistance, tolerance, dissipation, dissipationAtLimit, rating } = ballast;
  const shorted = pushed ** 2 * resistance * (1 + tolerance);
  return [
    `Ballasts get hot: up to ${watts(dissipation)} in each in use, and ${watts(dissipationAtLimit)} with its module at its limit. Keep them in moving air, away from wires and from what burns.`,
    ...(rating === undefined
      ? ['No usual resistor bears that: take several in parallel or in series, or a smaller value.']
      : []),
    ...(rating !== undefined && shorted > rating
      ? [
          `The rating of a ballast does not cover its module failing with the output shorted: the others then push ${amps(pushed)} through it, ${watts(shorted)} in a resistor of ${formatQuantity(rating, 'power')}, which burns. Put a fuse into each plus lead that clears at that current, or OR-ing diodes.`,
        ]
      : []),
  ];
}
