import { amps, volts } from '../analysis/in-words.js';
import { touchable } from '../circuit/touchable.js';
import { listed } from '../quantity/listed.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Volts } from '../quantity/quantity.js';
import { hasStack, highestOpen } from './laid-out.js';
import { canBeLookedAt, movementBetween } from './movements.js';
import { type Form, modulesOf } from './build.js';
import { inputAtRest, reachOf } from './stages-hanging.js';
import { railVoltsAtMost } from './rails.js';
import { dissipationOf } from './stages-sense.js';
import type { StagesFound } from './stages-standing.js';
import type { SwitchOver } from './staged-build.js';

/** What whoever builds a staged supply must know, a sentence or two each; the heaviest first. */
export function stagesCautions(found: StagesFound): readonly string[] {
  const { laid, switchOvers, standings } = found;
  return [
    'The modules are fed from the mains: their cases stay closed, all are unplugged before anything is wired, and outputs are proved dead with a meter first, as capacitors hold their charge.',
    ...touchCaution(reachOf(laid, standings)),
    ...hangingCautions(found),
    ...(laid.some(({ found: { circuit } }) => hasStack(circuit.form)) ||
    standings.some(({ hanging }) => hanging.length > 0)
      ? [
          'Earth one point of the supply at most, and that is in-. Whatever is joined to an output earths it as well: a meter or a load with an earthed 0 V may be joined to the whole supply only.',
        ]
      : []),
    ...sharingDiodesCaution(found),
    ...restCaution(found),
    ...fallBackCautions(found),
    ...leapCautions(found),
    ...liftCautions(found),
    ...interruptCautions(found),
    ...unusedCautions(found),
    'Contacts break a direct current, which does not go out by itself: take their rating for DC at the voltage named, switch with little or no load where that can be had, and expect bounce. What is said here of the order of contacts holds for contacts that work: one that is welded is not among the orders.',
    `What is guaranteed is for currents that hold for good. At each switch-over the input of the linear stage jumps, by up to ${volts(highestSwing(switchOvers))}: its output must bear that without passing it on.`,
    ...shortCaution(found),
    'The heat is that of the linear stage alone, at the highest voltage that the modules may have. Whatever else stands before or behind it gets warm too.',
    'All modules are switched on and off together, from one switched supply.',
    'Local codes and a licensed person decide what may be joined to the mains and to earth, and how.',
  ];
}

/** Nobody keeps an output from asking more than is guaranteed. */
function shortCaution({ laid, wish: { linearStage } }: StagesFound): readonly string[] {
  const across = highestOpen(laid);
  const heat = across * linearStage.current;
  const most = dissipationOf(linearStage);
  if (heat <= most) return [];
  const watts = (power: number): string => formatQuantity(power, 'power', { significant: 3 });
  return [
    `Nothing here keeps the load from asking more than is guaranteed: a short at the output would put up to ${volts(across)} across the linear stage, and at its ${amps(linearStage.current)} make ${watts(heat)} of heat, where it may make ${watts(most)}. It must limit itself by its heat, or be switched off.`,
  ];
}

/**
 * A file names one forward voltage. That one diode may drop 0.2 V less than another of its kind, and less the warmer
 * it gets, is common practice, no published source.
 */
function sharingDiodesCaution({ laid, wish: { diodes } }: StagesFound): readonly string[] {
  if (diodes.length === 0 || !laid.some(({ found }) => hasGroup(found.circuit.form))) return [];
  return [
    'Where modules side by side feed through diodes, those are taken to drop alike, and what is guaranteed rests on that. One that drops 0.2 V less lets its module carry more, and drops less still as it gets warm: take diodes of one kind, mount them on one heat sink, and measure the current of each module at full load before the supply is left alone.',
  ];
}

function hasGroup(form: Form): boolean {
  return form.kind === 'group' || (form.kind === 'stack' && form.of.some(hasGroup));
}

function touchCaution(highest: Volts): readonly string[] {
  return highest > touchable
    ? [
        `It reaches ${railVoltsAtMost(highest)} before the linear stage, beyond the ${touchable} V DC that are safe to touch (ES1, IEC 62368-1): cover all of it, so that nothing can be reached without a tool.`,
      ]
    : [];
}

/** Those that no stack shows so high: whoever reads the arrangements would take them for dead. */
function hangingCautions({ standings, laid }: StagesFound): readonly string[] {
  const stacked = new Set(
    laid.flatMap(({ found: { circuit } }) => (hasStack(circuit.form) ? modulesOf(circuit.form) : [])),
  );
  return standings.flatMap(({ arrangement, hanging }) => {
    const alive = hanging.filter(({ module }) => !stacked.has(module));
    if (alive.length === 0) return [];
    const where =
      arrangement === undefined
        ? 'With no contact driven modules'
        : `In ${arrangement} modules that feed nothing there`;
    const each = alive.map(({ module, top }) => `${module} by up to ${railVoltsAtMost(top.high)}`);
    return [`${where} are live all the same and stand off in-: ${listed(each)}.`];
  });
}

/** Its output does not follow: what was right for the arrangement before may be too hot for that at rest. */
function restCaution({ laid, standings, wish: { linearStage } }: StagesFound): readonly string[] {
  const atRest = inputAtRest(laid, standings);
  const [lowest] = laid;
  const heat = atRest * linearStage.current;
  const most = dissipationOf(linearStage);
  if (lowest === undefined || atRest <= lowest.found.openVoltage.high + arithmetic || heat <= most) return [];
  const watts = (power: number): string => formatQuantity(power, 'power', { significant: 3 });
  return [
    `Contacts that lose their supply put up to ${volts(atRest)} on the linear stage, whatever its output then is: at a low output and its ${amps(linearStage.current)} it makes up to ${watts(heat)} of heat, where it may make ${watts(most)}. Rest had better be the lowest arrangement, or the load goes off with the contacts.`,
  ];
}

const arithmetic = 1e-9;

/** Relays that lose their supply fall back one by one, over all steps at once, and no sequence holds any more. */
function fallBackCautions({ laid, switching }: StagesFound): readonly string[] {
  return laid.flatMap(({ found: { name }, driven }) => {
    if (!canBeLookedAt(switching.contacts, driven, [])) return [];
    const verdict = movementBetween(switching, driven, []).bySequence['any-order'];
    return verdict.kind === 'clear'
      ? []
      : [
          `When the contacts lose their supply in ${name} they fall back in any order: ${verdict.order.join(', then ')}, and ${verdict.connection.sentence}. The modules must be off before the contacts are, or the contacts hold until the outputs are dead.`,
        ];
  });
}

/** For each leap, of which there may be many: seven change-over contacts. */
const mostLeapStates = 3 ** 7;

/** An output that leaps over an arrangement moves the contacts of two steps at once. */
function leapCautions({ laid, switching, wish }: StagesFound): readonly string[] {
  const leaps = laid.flatMap((lower, index) =>
    laid.slice(index + 2).flatMap((upper) => [[lower, upper] as const, [upper, lower] as const]),
  );
  const told = leaps.flatMap(([from, to]): readonly string[] => {
    const way = `From ${from.found.name} straight to ${to.found.name}`;
    if (!canBeLookedAt(switching.contacts, from.driven, to.driven, mostLeapStates)) {
      return [`${way} more contacts move than are looked at.`];
    }
    const verdict = movementBetween(switching, from.driven, to.driven).bySequence[wish.sequence];
    return verdict.kind === 'clear'
      ? []
      : [
          `${way}, as when the output leaps: ${verdict.order.join(', then ')}, and ${verdict.connection.sentence}.`,
        ];
  });
  return told.length === 0
    ? []
    : [
        `${told.join(' ')} Go through all arrangements in between, and wait at each until its contacts have come to rest.`,
      ];
}

/** For a moment, but a capacitor or a transistor needs no longer. */
function liftCautions({ laid, switchOvers, wish }: StagesFound): readonly string[] {
  const highest = highestOpen(laid);
  return switchOvers.flatMap(({ lower, upper, goingUp, comingDown }) => {
    const lift = Math.max(...[goingUp, comingDown].map(({ lifts }) => lifts?.[wish.sequence] ?? 0));
    return lift <= highest + arithmetic
      ? []
      : [
          `While the contacts move between ${lower} and ${upper} the input of the linear stage may stand for a moment at ${volts(lift)} or more, beyond the ${volts(highest)} of any arrangement: all that is joined to it, and the contacts, must bear that. Better wire it so that no order does it.`,
        ];
  });
}

function interruptCautions({ switchOvers, wish }: StagesFound): readonly string[] {
  const interrupted = switchOvers.flatMap(({ lower, upper, goingUp, comingDown }) => {
    const isDark = [goingUp, comingDown].some(({ bySequence }) => {
      const verdict = bySequence[wish.sequence];
      return verdict.kind === 'clear' && verdict.interrupts;
    });
    return isDark ? [`${lower} and ${upper}`] : [];
  });
  return interrupted.length === 0
    ? []
    : [
        `Between ${listed(interrupted)} the linear stage is without any feed while the contacts move: a capacitor at its input has to carry the load for that time (C = I·t/ΔV), or the output dips.`,
      ];
}

/** Arrangements that the output range never comes to. */
function unusedCautions({ switchOvers, wish }: StagesFound): readonly string[] {
  const never = [
    ...switchOvers.filter(({ up }) => up <= wish.output.from).map(({ lower }) => lower),
    ...switchOvers.filter(({ up }) => up >= wish.output.to).map(({ upper }) => upper),
  ];
  return never.length === 0
    ? []
    : [
        `${listed(never)} ${never.length === 1 ? 'is' : 'are'} never used as the output rises within its range.`,
      ];
}

function highestSwing(switchOvers: readonly SwitchOver[]): Volts {
  return Math.max(0, ...switchOvers.map(({ swing }) => swing.noLoad));
}
