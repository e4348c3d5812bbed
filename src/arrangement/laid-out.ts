import { behindDrop, type SupplyLine, voltageOf } from '../circuit/supply-line.js';
import type { Amperes, Volts } from '../quantity/quantity.js';
import { UnfitWishError } from './arrangement-error.js';
import type { Circuit, Estimate, Form } from './build.js';
import { forbiddenIn } from './forbidden-connection.js';
import { formInWords, isSameForm, madeForm, withoutDrops } from './made-form.js';
import type { ModuleProfile, Taken } from './module-profile.js';
import type { FoundArrangement } from './staged-build.js';
import type { Contact, StagesWish, WishedArrangement } from './stages-wish.js';
import { netlistOf, settledState, type Switching } from './switching.js';
import { type FormBehindDrops, type WorstForm, worstOf } from './worst-form.js';

/** An arrangement with the lines between which its voltage lies. */
export interface LaidOut {
  readonly found: FoundArrangement;
  readonly driven: readonly string[];
  /** Lowest and highest voltage over the current; both reach to what it can give. */
  readonly low: SupplyLine;
  readonly high: SupplyLine;
  /** What the modules and their ballasts allow, continuously. */
  readonly limit: Amperes;
  readonly limitedBy: 'module' | 'ballast';
  /** What it can feed through the linear stage. */
  readonly fullCurrent: Amperes;
}

/** The arrangements by rising voltage, each with what its contacts make of the modules. */
export function layOut(
  profiles: readonly ModuleProfile[],
  wish: StagesWish,
  switching: Switching,
): readonly LaidOut[] {
  return wish.arrangements
    .map((arrangement) => laidOut(arrangement, profiles, wish, switching))
    .sort((one, other) => one.found.openVoltage.value - other.found.openVoltage.value);
}

function laidOut(
  arrangement: WishedArrangement,
  profiles: readonly ModuleProfile[],
  wish: StagesWish,
  switching: Switching,
): LaidOut {
  const { name, form, driven } = arrangement;
  const made = formMade(arrangement, switching);
  const { ballast, linearStage } = wish;
  const worst = worstOf(made, profiles, ballast, (module) => within(module, ballast).current);
  const best = worstOf(
    made,
    profiles.map(atBest),
    ballast && { ...ballast, tolerance: 0 },
    (module) => within(module, ballast).current,
  );
  // A diode takes less of the voltage at less current, so at worst it takes none.
  const high = behindDrop(worst.strong, -mostDrop(made));
  const fullCurrent = Math.min(worst.limit, linearStage.current);
  const estimateAt = (current: Amperes): Estimate => ({
    value: voltageOf(best.weak, current),
    low: voltageOf(worst.weak, current),
    high: voltageOf(high, current),
  });
  return {
    found: {
      name,
      circuit: drawn(form, made, wish),
      closed: closedWith(wish.contacts, driven),
      openVoltage: estimateAt(0),
      fullVoltage: estimateAt(fullCurrent),
      current: worst.limit,
      setBy: setBy(worst, profiles, ballast),
    },
    driven,
    low: worst.weak,
    high,
    limit: worst.limit,
    limitedBy: limitedBy(worst, profiles, ballast),
    fullCurrent,
  };
}

/**
 * What the settled contacts make, which must be what the arrangement says.
 * @throws UnfitWishError that says what they make instead.
 */
function formMade({ name, form, driven }: WishedArrangement, switching: Switching): FormBehindDrops {
  const netlist = netlistOf(switching, settledState(switching.contacts, driven));
  const refuse = (really: string): never => {
    const with_ = driven.length === 0 ? 'With no contact driven' : `With ${driven.join(', ')} driven`;
    throw new UnfitWishError(
      `${name} is to be ${formInWords(form)}. ${with_} ${really}`,
      `Mend the wires, the contacts, or what is driven in ${name}.`,
    );
  };
  const forbidden = forbiddenIn(switching, netlist);
  if (forbidden !== undefined) return refuse(`${forbidden.sentence}.`);
  const made = madeForm(netlist);
  switch (made.kind) {
    case 'nothing':
      return refuse('no module feeds the linear stage.');
    case 'neither':
      return refuse(`the contacts make neither a group nor a stack of ${made.modules.join(', ')}.`);
    case 'form': {
      const bare = withoutDrops(made.form);
      return isSameForm(bare, form) ? made.form : refuse(`the contacts make ${formInWords(bare)}.`);
    }
  }
}

export type Ballast = StagesWish['ballast'];

/** What a module may give: what it is recommended for, or what its ballast bears. */
export function within(
  module: ModuleProfile,
  ballast: Ballast,
): { readonly current: Amperes; readonly by: LaidOut['limitedBy'] } {
  const own = module.recommended.current;
  if (ballast?.rating === undefined) return { current: own, by: 'module' };
  const borne = Math.sqrt(ballast.rating / (ballast.resistance * (1 + ballast.tolerance)));
  return borne < own ? { current: borne, by: 'ballast' } : { current: own, by: 'module' };
}

function limitedBy(
  { by }: WorstForm,
  profiles: readonly ModuleProfile[],
  ballast: Ballast,
): LaidOut['limitedBy'] {
  const module = profiles.find(({ name }) => name === by);
  return module === undefined ? 'module' : within(module, ballast).by;
}

function setBy(worst: WorstForm, profiles: readonly ModuleProfile[], ballast: Ballast): string {
  if (limitedBy(worst, profiles, ballast) === 'ballast') {
    return `the ballast of ${worst.by}, which would be the first to get hotter than it may`;
  }
  const module = profiles.find(({ name }) => name === worst.by);
  return `${worst.by}, which would be the first above what it is recommended for (${module?.recommended.why ?? ''})`;
}

/** The same module without its uncertainty. */
function atBest(profile: ModuleProfile): ModuleProfile {
  const certain = (taken: Taken): Taken => ({ ...taken, interval: [taken.value, taken.value] });
  return { ...profile, openCircuit: certain(profile.openCircuit), droop: certain(profile.droop) };
}

/** The most that diodes take on any way through the form. */
function mostDrop(form: FormBehindDrops): Volts {
  switch (form.kind) {
    case 'module':
      return 0;
    case 'behind':
      return form.drop + mostDrop(form.of);
    case 'stack':
      return form.of.reduce((sum, part) => sum + mostDrop(part), 0);
    case 'group':
      return Math.max(...form.of.map(mostDrop));
  }
}

/** A module that is stacked in one arrangement has its diode in all of them. */
function drawn(form: Form, made: FormBehindDrops, { ballast, arrangements }: StagesWish): Circuit {
  return {
    form,
    ballast: ballast && { resistance: ballast.resistance, tolerance: ballast.tolerance },
    reverseDiodes: arrangements.some((each) => hasStack(each.form)),
    orDiodes: made.kind !== 'module' && everyModuleBehind(made),
  };
}

function everyModuleBehind(form: FormBehindDrops): boolean {
  if (form.kind === 'behind') return form.of.kind === 'module';
  return form.kind !== 'module' && form.of.every(everyModuleBehind);
}

/** The highest that any arrangement may stand at with no load. */
export function highestOpen(laid: readonly LaidOut[]): Volts {
  return Math.max(...laid.map(({ found }) => found.openVoltage.high));
}

export function hasStack(form: Form): boolean {
  return form.kind === 'stack' || (form.kind === 'group' && form.of.some(hasStack));
}

/** The contacts that are closed, change-over contacts with the side they are on. */
function closedWith(contacts: readonly Contact[], driven: readonly string[]): readonly string[] {
  return contacts.flatMap((contact) => {
    const isDriven = driven.includes(contact.name);
    if (contact.kind === 'change-over') {
      return [`${contact.name} on ${isDriven ? contact.driven : contact.rest}`];
    }
    return (contact.kind === 'make') === isDriven ? [contact.name] : [];
  });
}
