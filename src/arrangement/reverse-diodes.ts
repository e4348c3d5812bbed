import type { Amperes, Volts, Watts } from '../quantity/quantity.js';
import { addedUp } from './added-up.js';
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
    return diodeOf(profile, { rest: rest.map((each) => [each]), voltage });
  });
}

/**
 * The same where groups stand one upon the other, a diode across each of their modules: the modules of the other
 * groups push together, and may all find their way through one of a failed group's diodes.
 */
export function groupDiodesOf(groups: readonly (readonly ModuleProfile[])[]): readonly ReverseDiode[] {
  return groups.flatMap((group) => {
    const rest = groups.filter((each) => each !== group);
    const voltage = rest.reduce((sum, each) => sum + highestOf(each), 0);
    return group.map((profile) => diodeOf(profile, { rest, voltage }));
  });
}

function highestOf(group: readonly ModuleProfile[]): Volts {
  return Math.max(...group.map(({ openCircuit }) => openCircuit.interval[1]));
}

function diodeOf(
  { name, openCircuit }: ModuleProfile,
  { rest, voltage }: { readonly rest: readonly (readonly ModuleProfile[])[]; readonly voltage: Volts },
): ReverseDiode {
  const pushed = rest.map((group) => group.map(mostCurrentOf));
  const sums = pushed.map((group) => group.reduce((sum, most) => sum + most.current, 0));
  const current = Math.max(0, ...sums);
  const blocked = Math.max(voltage, openCircuit.interval[1]);
  return {
    module: name,
    current,
    ...(pushed.flat().some(({ isKnown }) => !isKnown) ? { bound: 'least' as const } : {}),
    voltage,
    heat: heatAt(current),
    rating: { current: Math.ceil(reserve * current), voltage: gradeFor(reserve * blocked) },
  };
}

function heatAt(current: Amperes): Watts {
  return forwardDrop * current;
}
