import type { Amperes, Volts, Watts } from '../quantity/quantity.js';
import { addedUp } from './added-up.js';
import type { Form } from './build.js';
import { gradeFor } from './diode-grade.js';
import type { ModuleProfile } from './module-profile.js';
import { mostCurrentOf } from './most-current.js';
import type { ReverseDiode } from './series-build.js';

/** Above what it has to bear. Common practice, no published source. */
const reserve = 1.5;
/** Across a silicon rectifier that is worked hard, in V; common practice, from memory. */
const forwardDrop: Volts = 1.1;

/**
 * The diode across each output, its cathode to the plus. In use it blocks its module's own voltage. When that
 * module fails or gives up, the current of the string goes round it through the diode.
 *
 * The most that can come is not what the weakest of the others holds: with a diode across every output the
 * strong ones push through the diodes of the weak ones too. Into a short circuit at the string's output they
 * do that even while all are sound. So it is the most that the strongest of the others gives anywhere on its
 * curve: at its knee, where it folds back, hiccups or latches off, or into a short circuit. Checked with
 * `stringPoint` in test/reference/series-diodes.test.ts.
 *
 * Without the diode a failed output stands backwards across all that the others give, so the diode is bought
 * for that voltage too, though it only ever blocks its module's own.
 */
export function reverseDiodesOf(profiles: readonly ModuleProfile[]): readonly ReverseDiode[] {
  return profiles.map((profile) => {
    const rest = profiles.filter((each) => each !== profile);
    const voltage = addedUp(rest.map(({ openCircuit }) => ({ taken: openCircuit, times: 1 }))).high;
    return diodeOf(profile, { pushed: mostOfAny(rest.map(mostCurrentOf)), reversed: voltage, held: 0 });
  });
}

/**
 * The same of any form, for each module that stands in a stack anywhere in it, in the order of the form.
 *
 * What comes through the diode of a module that is driven backwards, by what it is a part of:
 *
 * - whatever feeds a load, which pushes nothing: 0;
 * - a stack carries one current. Either another of its parts drives that, and gives no more than its most; or none
 *   does, the whole stack is driven backwards, and what comes through it comes from without;
 * - of a group all are driven backwards or none is, and one of them may take what comes through the group from
 *   without, whole: the others push none of it, as they too only give.
 *
 * The most that a stack gives is that of its strongest part, through the diodes of the others; of a group, the sum.
 * Checked against a solver of its own, with modules off and loads of all sizes, in
 * test/arrangement/form-diodes.test.ts.
 * @param profiles in any order; the modules of the form must be among them.
 */
export function formDiodesOf(form: Form, profiles: readonly ModuleProfile[]): readonly ReverseDiode[] {
  const within = (part: Form, borne: Borne | undefined): readonly ReverseDiode[] => {
    if (part.kind === 'module') {
      const profile = profiles.find(({ name }) => name === part.name);
      return profile === undefined || borne === undefined ? [] : [diodeOf(profile, borne)];
    }
    return part.of.flatMap((member) => {
      const others = part.of.filter((each) => each !== member).map((each) => reachOf(each, profiles));
      return within(member, part.kind === 'group' ? inGroup(borne, others) : inStack(borne, others));
    });
  };
  return within(form, undefined);
}

/** What may come to a part from the rest of its form; undefined where it is in no stack. */
interface Borne {
  /** The most that is pushed through it while it is driven backwards. */
  readonly pushed: Most;
  /** What would stand backwards across it without a diode. */
  readonly reversed: Volts;
  /** To what others side by side hold it up, which its diode blocks while it is off. */
  readonly held: Volts;
}

interface Most {
  readonly current: Amperes;
  readonly isKnown: boolean;
}

/** The most that a part gives. */
interface Reach extends Most {
  readonly voltage: Volts;
}

function inStack(borne: Borne | undefined, others: readonly Reach[]): Borne {
  return {
    pushed: mostOfAny([...others, ...(borne === undefined ? [] : [borne.pushed])]),
    reversed: (borne?.reversed ?? 0) + sum(others.map(({ voltage }) => voltage)),
    held: borne?.held ?? 0,
  };
}

function inGroup(borne: Borne | undefined, others: readonly Reach[]): Borne | undefined {
  return borne && { ...borne, held: Math.max(borne.held, ...others.map(({ voltage }) => voltage)) };
}

function reachOf(form: Form, profiles: readonly ModuleProfile[]): Reach {
  if (form.kind === 'module') {
    const profile = profiles.find(({ name }) => name === form.name);
    return profile === undefined
      ? { voltage: 0, current: 0, isKnown: false }
      : { voltage: profile.openCircuit.interval[1], ...mostCurrentOf(profile) };
  }
  const parts = form.of.map((part) => reachOf(part, profiles));
  const voltages = parts.map(({ voltage }) => voltage);
  return form.kind === 'stack'
    ? { voltage: sum(voltages), ...mostOfAny(parts) }
    : {
        voltage: Math.max(...voltages),
        current: sum(parts.map(({ current }) => current)),
        isKnown: parts.every(({ isKnown }) => isKnown),
      };
}

function mostOfAny(each: readonly Most[]): Most {
  return {
    current: Math.max(0, ...each.map(({ current }) => current)),
    isKnown: each.every(({ isKnown }) => isKnown),
  };
}

function diodeOf({ name, openCircuit }: ModuleProfile, { pushed, reversed, held }: Borne): ReverseDiode {
  const { current, isKnown } = pushed;
  const blocked = Math.max(reversed, held, openCircuit.interval[1]);
  return {
    module: name,
    current,
    ...(isKnown ? {} : { bound: 'least' as const }),
    voltage: reversed,
    heat: heatAt(current),
    rating: { current: Math.ceil(reserve * current), voltage: gradeFor(reserve * blocked) },
  };
}

function heatAt(current: Amperes): Watts {
  return forwardDrop * current;
}

function sum(values: readonly number[]): number {
  return values.reduce((total, value) => total + value, 0);
}
