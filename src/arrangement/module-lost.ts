import { amps, ratedAmperes } from '../analysis/in-words.js';
import { formatExact, formatQuantity } from '../quantity/format-quantity.js';
import { listed } from '../quantity/listed.js';
import { roundedDown } from '../quantity/rounded-down.js';
import type { Amperes } from '../quantity/quantity.js';
import { extentOf } from './group-draws.js';
import { groupOf } from './group-form.js';
import type { ModuleProfile } from './module-profile.js';
import { mostCurrentOf } from './most-current.js';
import { orDiodeDrop, orDiodeFor } from './or-diode.js';
import type { ModuleLost } from './parallel-build.js';
import type { KnownGroup } from './share-band.js';
import { type WorstBallast, worstOf } from './worst-form.js';

/** Of each module in turn: what the others can do without it, and what they do to it when its output is shorted. */
export function failuresOf(
  profiles: readonly ModuleProfile[],
  group: KnownGroup,
  at: { readonly load: Amperes; readonly ballast: WorstBallast | undefined },
): readonly ModuleLost[] {
  return profiles.map((lost, index) => {
    const others = profiles.filter((profile) => profile !== lost);
    const recommended = worstOf(groupOf(others), others, at.ballast).limit;
    // What holds in 97.5 of 100 cases: no less is to be relied on when one has just failed.
    const usable = extentOf(group.drawn.filter((_, branch) => branch !== index)).usable.low;
    const rest = at.load <= recommended ? 'carries-it' : at.load <= usable ? 'overloaded' : 'fails';
    const found = { recommended, usable, rest } as const;
    return {
      module: lost.name,
      ...found,
      sentences: [
        switchedOff(lost, others, { ...found, load: at.load }),
        `Whether anything flows back into ${lost.name} while its input is off no record shows: look at its current before that is relied on.`,
        shorted(lost, others, at.ballast),
        diodeSentence(profiles),
      ],
    };
  });
}

function switchedOff(
  { name }: ModuleProfile,
  others: readonly ModuleProfile[],
  {
    recommended,
    usable,
    rest,
    load,
  }: Pick<ModuleLost, 'recommended' | 'usable' | 'rest'> & { load: Amperes },
): string {
  const names = listed(others.map((other) => other.name));
  const [carry, hold, are] = others.length === 1 ? ['carries', 'holds', 'is'] : ['carry', 'hold', 'are'];
  const lasting = roundedDown(recommended, 'current');
  const held = roundedDown(usable, 'current');
  switch (rest) {
    case 'carries-it':
      return `With ${name} switched off, ${names} ${carry} ${roundedDown(load, 'current')} and ${are} still within the ${lasting} recommended for that.`;
    case 'overloaded':
      return `With ${name} switched off, ${names} ${hold} ${roundedDown(load, 'current')} for a while only: ${lasting} is recommended for that.`;
    case 'fails':
      return `With ${name} switched off, the group fails: ${names} ${hold} ${held}, and the load is ${roundedDown(load, 'current')}. Take the load down to ${lasting} first.`;
  }
}

function shorted(
  { name }: ModuleProfile,
  others: readonly ModuleProfile[],
  ballast: WorstBallast | undefined,
): string {
  const pushed = others.reduce((sum, other) => sum + mostCurrentOf(other).current, 0);
  const atLeast = others.every((other) => mostCurrentOf(other).isKnown) ? 'up to' : 'at least';
  const heat = ballast === undefined ? 0 : pushed ** 2 * ballast.resistance * (1 + ballast.tolerance);
  const resistor =
    ballast === undefined
      ? ''
      : `, its ballast turns ${formatQuantity(heat, 'power', { significant: 2 })} into heat`;
  return `Should ${name} fail with its output shorted, the others push ${atLeast} ${amps(pushed)} into it${resistor}, and the bus is down until ${name} is taken out.`;
}

function diodeSentence(profiles: readonly ModuleProfile[]): string {
  const { rating, heat } = orDiodeFor(profiles);
  const voltage = formatExact(rating.voltage, 'voltage');
  return (
    `Where the group must survive that, each module needs an OR-ing diode in its plus lead: ${ratedAmperes(rating.current)} and ${voltage.value} ${voltage.unit} reverse at least; ` +
    `it costs about ${formatQuantity(orDiodeDrop, 'voltage')} of the bus and makes up to ${formatQuantity(heat, 'power', { significant: 2 })} of heat.`
  );
}
