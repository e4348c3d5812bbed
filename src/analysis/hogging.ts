import { formatQuantity } from '../quantity/format-quantity.js';
import type { Ohms, Ratio, Volts } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { type Finding, inWords } from './finding.js';
import { amps, percent } from './in-words.js';
import type { GroupLook } from './module-currents.js';
import type { ModuleLine } from './module-lines.js';
import type { Saturated } from './saturation.js';
import { carriedAt, extremesOf, imbalanceFinding, sumOf } from './shares.js';

/** What is known of a group when it comes to who hogs the load, and why. */
export interface Sharing {
  /** The points it held, by rising load. */
  readonly held: readonly GroupLook[];
  /** All looks, those with a module unplugged among them. */
  readonly looks: readonly GroupLook[];
  readonly lines: ReadonlyMap<string, ModuleLine>;
  readonly saturated: Saturated | undefined;
  /** How unequal the currents may be. */
  readonly setting: Ratio;
}

/**
 * `hogging-module`: the one that carries most, where the imbalance is beyond what was asked for with all its
 * interval; `none` where it is within with all of it. Judged at the highest point that was held with all
 * modules below their limits: at its limit a module gives way to the others, and shares look equal again.
 */
export function hoggingFinding(header: RunHeader, sharing: Sharing): Finding | undefined {
  const { held, saturated, setting } = sharing;
  const look = beforeLimit(sharing);
  if (look === undefined) return undefined;
  const { value, interval, step } = imbalanceFinding(header, look, { setting, curve: held });
  const [low, high] = interval ?? [Number(value), Number(value)];
  const { most, least } = extremesOf(look);
  const share = carriedAt(look).find(({ module }) => module === most)?.share ?? 0;
  const carries = `it carries ${percent(share)} of ${amps(look.total)}`;
  const then =
    saturated === undefined
      ? ''
      : `; ${saturated.module} ${saturated.how === 'stays' ? 'is at its limit' : 'has left'} beyond ${amps(saturated.total)}`;
  if (low > setting) {
    const why = whyItHogs(sharing, look, { most, least });
    return inWords('hogging-module', most, {
      step,
      note: `${carries}${why === '' ? '' : ` because ${why}`}${then}`,
    });
  }
  const within = `the imbalance is ${percent(Math.max(0, low))} to ${percent(high)} at ${amps(look.total)}, ${percent(setting)} asked for`;
  return inWords('hogging-module', high < setting ? 'none' : 'undetermined', {
    step,
    note: `${within}${then}`,
  });
}

/** The highest held look with all modules below their limits; the highest of all where none met its limit. */
function beforeLimit({ held, saturated }: Sharing): GroupLook | undefined {
  const below = held.filter(({ total }) => total <= (saturated?.total ?? Number.POSITIVE_INFINITY));
  return below.at(-1) ?? held.at(-1);
}

/** A cause that makes less than this of the difference is not worth naming. */
const worthNaming = 0.25;

/** From the modules' own lines: a higher voltage, or less resistance in the way. */
function whyItHogs(
  { lines, looks }: Sharing,
  look: GroupLook,
  { most, least }: { readonly most: string; readonly least: string },
): string {
  const [one, other] = [lines.get(most), lines.get(least)];
  const ballast = ballastInWords(looks, most, least);
  if (one === undefined || other === undefined) {
    const alone = aloneInWords(looks, most, least);
    return [alone, alone === '' ? '' : ballast].filter((part) => part !== '').join(', and ');
  }
  const mean = sumOf(look) / look.currents.length;
  const resistances = [one, other].map(({ droop, ballast: added }) => Math.max(0, droop.value) + added);
  const [own = 0, its = 0] = resistances;
  const total = own + its;
  // I₁ − I₂ of two branches on one bus: the voltages' part and the resistances' part.
  const byVoltage = (2 * (one.openCircuit.value - other.openCircuit.value)) / total;
  const byResistance = (2 * mean * (its - own)) / total;
  const all = Math.max(0, byVoltage) + Math.max(0, byResistance);
  const reasons = [
    byVoltage > worthNaming * all
      ? `its open-circuit voltage is ${millivolts(one.openCircuit.value - other.openCircuit.value)} above ${least}'s`
      : '',
    byResistance > worthNaming * all
      ? `it gives way by ${milliohms(own)} where ${least} gives way by ${milliohms(its)}, droop and ballast together`
      : '',
    ballast,
  ];
  return reasons.filter((part) => part !== '').join(', and ');
}

/** Where one of them carried too little for a line: what each gave alone, while the other was unplugged. */
function aloneInWords(looks: readonly GroupLook[], most: string, least: string): string {
  const terminal = (module: string, unplugged: string): Volts | undefined => {
    const look = looks.find(({ without, currents }) => without === unplugged && currents.length === 2);
    const each = look?.currents.find((current) => current.module === module);
    return each === undefined ? undefined : each.bus + each.volts;
  };
  const [one, other] = [terminal(most, least), terminal(least, most)];
  const total = looks.find(({ without }) => without === least)?.total;
  if (one === undefined || other === undefined || total === undefined) return '';
  const by = `${millivolts(Math.abs(one - other))} ${one > other ? 'above' : 'below'}`;
  return `alone at ${amps(total)} it stands ${by} ${least}`;
}

function ballastInWords(looks: readonly GroupLook[], most: string, least: string): string {
  const currents = looks.flatMap((look) => look.currents);
  const of = (module: string): Ohms | undefined => currents.find((each) => each.module === module)?.ballast;
  const [one, other] = [of(most), of(least)];
  if (one === undefined || other === undefined) return '';
  const mean = (one + other) / 2;
  return `there are ${mean < fewOhms ? 'only ' : ''}${milliohms(mean)} of ballast in each`;
}

const fewOhms: Ohms = 0.01;

function millivolts(volts: Volts): string {
  return formatQuantity(volts, 'voltage', { significant: 2 });
}

function milliohms(ohms: Ohms): string {
  return formatQuantity(ohms, 'resistance', { significant: 2 });
}
