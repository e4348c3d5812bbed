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
    const pushed = rest.map(mostCurrentOf);
    const current = Math.max(0, ...pushed.map((most) => most.current));
    const voltage = addedUp(rest.map(({ openCircuit }) => ({ taken: openCircuit, times: 1 }))).high;
    const blocked = Math.max(voltage, profile.openCircuit.interval[1]);
    return {
      module: profile.name,
      current,
      ...(pushed.some(({ isKnown }) => !isKnown) ? { bound: 'least' as const } : {}),
      voltage,
      heat: heatAt(current),
      rating: { current: Math.ceil(reserve * current), voltage: gradeFor(reserve * blocked) },
    };
  });
}

function heatAt(current: Amperes): Watts {
  return forwardDrop * current;
}
