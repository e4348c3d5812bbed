import { degrees, givenPercent, ratedAmperes, volts } from '../analysis/in-words.js';
import { resistorRating } from '../circuit/resistor-rating.js';
import { formatExact, formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Volts, Watts } from '../quantity/quantity.js';
import type { Part } from './build.js';
import { gradeFor } from './diode-grade.js';
import { hasStack, type LaidOut } from './laid-out.js';
import { moduleParts } from './module-parts.js';
import type { ModuleProfile } from './module-profile.js';
import { mostCurrentOf } from './most-current.js';
import { formDiodesOf } from './reverse-diodes.js';
import type { ReverseDiode } from './series-build.js';
import { seriesParts } from './series-parts.js';
import { reachOf } from './stages-hanging.js';
import type { StagesFound } from './stages-standing.js';
import type { Contact, LinearStage, StagesWish } from './stages-wish.js';

/** Above what it has to bear. Common practice, no published source. */
const reserve = 1.5;
/** The air around a heat sink in a cabinet, in °C, for a first choice. Common practice, no published source. */
const cabinetAir = 40;

/** What is bought for a staged supply. */
export function stagesParts(
  profiles: readonly ModuleProfile[],
  { laid, wish, standings }: Pick<StagesFound, 'laid' | 'wish' | 'standings'>,
  mostDissipation: Watts,
): readonly Part[] {
  const most = {
    voltage: reachOf(laid, standings),
    current: Math.max(...laid.map(({ fullCurrent }) => fullCurrent)),
  };
  const drawn = [
    ...moduleParts(profiles),
    ...ballastPart(profiles, most.current, wish),
    ...reverseDiodes(profiles, laid),
  ];
  return [
    ...drawn,
    ...apartFrom(drawn, [...contactParts(wish.contacts, most), ...steeringDiodes(wish, most)]),
    heatSink(wish.linearStage, mostDissipation),
  ];
}

/** What a file names as something is numbered that is drawn is told from it. */
function apartFrom(drawn: readonly Part[], named: readonly Part[]): readonly Part[] {
  const taken = new Set(drawn.flatMap(({ marks }) => marks));
  return named.map((part) => ({
    ...part,
    marks: part.marks.map((mark) => (taken.has(mark) ? `${mark} of the switching` : mark)),
  }));
}

function ballastPart(
  profiles: readonly ModuleProfile[],
  full: Amperes,
  { ballast }: StagesWish,
): readonly Part[] {
  if (ballast === undefined) return [];
  const heatAt = (current: Amperes): Watts => current ** 2 * ballast.resistance * (1 + ballast.tolerance);
  const inUse = heatAt(Math.min(full, Math.max(...profiles.map(({ recommended }) => recommended.current))));
  const atLimit = heatAt(Math.max(...profiles.map((profile) => mostCurrentOf(profile).current)));
  const rating = ballast.rating ?? resistorRating(inUse, atLimit);
  const value = formatExact(ballast.resistance, 'resistance');
  const watts = (power: Watts): string => formatQuantity(power, 'power', { significant: 2 });
  return [
    {
      marks: profiles.map((_, index) => `R${index + 1}`),
      what: 'ballast resistor in the plus lead of each module',
      ratings: [
        `${value.value} ${value.unit}`,
        `± ${givenPercent(ballast.tolerance)}`,
        rating === undefined
          ? `${watts(2 * inUse)} at least, of several`
          : `at least ${formatQuantity(rating, 'power')}`,
      ],
      why: `makes the modules of a group share: up to ${watts(inUse)} of heat in use, and ${watts(atLimit)} with its module at its limit${ballast.rating !== undefined && ballast.rating < 2 * inUse ? '; rated for less than twice what it bears in use, so keep it in moving air' : ''}`,
    },
  ];
}

/**
 * Each module keeps its diode in every arrangement, so it is bought for the worst of them. One that is never in a
 * stack has one as well, as heavy as the heaviest: the diagrams show it. Numbered in the order of the modules.
 */
function reverseDiodes(profiles: readonly ModuleProfile[], laid: readonly LaidOut[]): readonly Part[] {
  if (!laid.some(({ found }) => hasStack(found.circuit.form))) return [];
  const found = laid.flatMap((each) => formDiodesOf(each.found.circuit.form, profiles));
  return seriesParts(
    [],
    profiles.flatMap(({ name }) => {
      const own = found.filter(({ module }) => module === name);
      const heaviest = heaviestOf(own.length > 0 ? own : found);
      return heaviest === undefined ? [] : [{ ...heaviest, module: name }];
    }),
  );
}

/** Of each rating the highest. */
function heaviestOf(diodes: readonly ReverseDiode[]): ReverseDiode | undefined {
  const [first, ...others] = diodes;
  return others.reduce<ReverseDiode | undefined>((most, each) => {
    if (most === undefined) return each;
    const [lighter, heavier] = most.current < each.current ? [most, each] : [each, most];
    const bound = lighter.bound ?? heavier.bound;
    return {
      ...heavier,
      ...(bound === undefined ? {} : { bound }),
      voltage: Math.max(most.voltage, each.voltage),
      rating: {
        current: Math.max(most.rating.current, each.rating.current),
        voltage: Math.max(most.rating.voltage, each.rating.voltage),
      },
    };
  }, first);
}

const kinds: Readonly<Record<Contact['kind'], string>> = {
  make: 'contact that closes when driven',
  break: 'contact that opens when driven',
  'change-over': 'change-over contact, break before make',
};

function contactParts(
  contacts: readonly Contact[],
  most: { readonly voltage: Volts; readonly current: Amperes },
): readonly Part[] {
  const named = contacts.map((contact) => ({
    name: contact.name,
    what:
      contact.kind === 'change-over' && contact.bridges
        ? 'change-over contact, make before break'
        : kinds[contact.kind],
  }));
  return [...new Set(named.map(({ what }) => what))].map((what) => ({
    marks: named.filter((each) => each.what === what).map(({ name }) => name),
    what,
    ratings: [
      `breaks ${formatQuantity(Math.ceil(most.voltage), 'voltage')} DC`,
      `at least ${ratedAmperes(Math.ceil(most.current))}`,
    ],
    why: `stands at most across ${volts(most.voltage)} with no load, and carries at most the full current of an arrangement; a rating for AC says nothing of DC`,
  }));
}

function steeringDiodes(
  { diodes }: StagesWish,
  most: { readonly voltage: Volts; readonly current: Amperes },
): readonly Part[] {
  if (diodes.length === 0) return [];
  const forward = Math.max(...diodes.map(({ forwardVoltage }) => forwardVoltage));
  return [
    {
      marks: diodes.map(({ name }) => name),
      what: 'diode of the switching',
      ratings: [
        `at least ${ratedAmperes(Math.ceil(reserve * most.current))}`,
        `${formatQuantity(gradeFor(reserve * most.voltage), 'voltage')} reverse`,
        `at most ${formatQuantity(forward, 'voltage')} forward`,
      ],
      why: `makes up to ${formatQuantity(forward * most.current, 'power', { significant: 2 })} of heat at full current, and bears the highest voltage of all arrangements`,
    },
  ];
}

function heatSink({ dissipation }: LinearStage, most: Watts): Part {
  const watts = formatQuantity(most, 'power', { significant: 3 });
  const shared = { marks: ['heat sink'], what: 'heat sink of the linear stage' };
  if (dissipation.kind === 'fixed') {
    return {
      ...shared,
      ratings: [`carries off ${watts}`],
      why: 'what the linear stage may turn into heat was given as it stands; the heat sink has to keep that true',
    };
  }
  const rise = dissipation.case - cabinetAir;
  const keeps = `keeps the case at ${degrees(dissipation.case)} at most`;
  return {
    ...shared,
    ratings:
      rise > 0
        ? [keeps, `at most ${threeDigitsDown(rise / most)} K/W from case to air of ${degrees(cabinetAir)}`]
        : [keeps],
    why: `with ${watts} of heat; what lies between case and heat sink is part of it`,
  };
}

/** Never up: what is allowed at most must not grow by being written. */
function threeDigitsDown(value: number): number {
  const step = 10 ** (Math.floor(Math.log10(value)) - 2);
  return Number((Math.floor(value / step + 1e-9) * step).toPrecision(3));
}
