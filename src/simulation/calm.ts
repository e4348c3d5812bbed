import type { LoadLaw } from '../circuit/load-law.js';
import type { Kelvins, Seconds } from '../quantity/quantity.js';
import type { CircuitState } from './circuit-state.js';
import { isSteadyBetween, meanSquareCurrents } from './goal-point.js';
import { held, isSameFor, outlook } from './outlook.js';
import type { SimulatedCircuit } from './resting-point.js';
import { attemptBegins } from './retry.js';
import { type ModulePhase, periodOf } from './virtual-module.js';
import { limitFactor, longestHeld, warmed } from './warming.js';

/**
 * Temperatures over which a circuit in these phases stays in them: nobody is pushed past a limit, and nobody who
 * tries could start. It was found out at both ends of them; along them the limits only rise, or only fall.
 */
interface Calm {
  readonly circuit: SimulatedCircuit;
  readonly phases: readonly ModulePhase['kind'][];
  readonly rises: readonly { readonly least: Kelvins; readonly most: Kelvins }[];
  /** The mean squares of the currents, where no limit has a part in them: then they are the same over all of it. */
  readonly steady: readonly number[] | undefined;
}

/** Of each load the last one: as long as a circuit stays within it nothing needs to be solved. */
const calms = new WeakMap<LoadLaw, Calm>();

/** Each time that a circuit does not stay calm for a span of time, this part of it is tried. */
const SHORTER = 1 / 4;

/**
 * Carries a circuit on as far as it is known that nothing but temperatures changes, at the longest to `until`.
 * Undefined where it is not known.
 */
export function calmly(
  circuit: SimulatedCircuit,
  state: CircuitState,
  law: LoadLaw,
  until: Seconds,
): CircuitState | undefined {
  const known = calms.get(law);
  const then = known && within(known, circuit, state, law, until);
  if (then !== undefined) return then;
  const found = calmFrom(circuit, state, law, until);
  if (found === undefined) return undefined;
  calms.set(law, found);
  return within(found, circuit, state, law, until);
}

function within(
  calm: Calm,
  circuit: SimulatedCircuit,
  state: CircuitState,
  law: LoadLaw,
  until: Seconds,
): CircuitState | undefined {
  if (calm.circuit !== circuit || !holds(calm, state)) return undefined;
  const then =
    calm.steady === undefined
      ? warmed(
          circuit,
          state,
          meanSquareCurrents(circuit, state, law),
          Math.min(until, state.at + longestHeld(circuit)),
        )
      : warmed(circuit, state, calm.steady, until);
  return holds(calm, then) && !isAttemptBeginning(circuit, then) ? then : undefined;
}

/** The longest calm from here: for ever, or as long as the currents may be held, or some part of that. */
function calmFrom(
  circuit: SimulatedCircuit,
  state: CircuitState,
  law: LoadLaw,
  until: Seconds,
): Calm | undefined {
  const stands = held(state);
  if (!isSameFor(outlook(circuit, state, law), stands)) return undefined;
  const currents = meanSquareCurrents(circuit, state, law);
  const calmTo = (at: Seconds): Calm | undefined => {
    const then = warmed(circuit, state, currents, at);
    if (hasLostALimit(circuit, then)) return undefined;
    if (!isSameFor(outlook(circuit, then, law), stands)) return undefined;
    return between(circuit, state, then, isSteadyBetween(circuit, state, then, law) ? currents : undefined);
  };
  const forEver = calmTo(Number.POSITIVE_INFINITY);
  if (forEver?.steady !== undefined) return forEver;
  const longest = longestHeld(circuit);
  for (let span = longest; span >= Math.min(longest, until - state.at); span *= SHORTER) {
    const calm = calmTo(state.at + span);
    if (calm !== undefined) return calm;
  }
  return undefined;
}

function between(
  circuit: SimulatedCircuit,
  one: CircuitState,
  other: CircuitState,
  steady: Calm['steady'],
): Calm {
  return {
    circuit,
    steady,
    phases: one.modules.map(({ phase }) => phase.kind),
    rises: one.modules.map(({ rise }, place) => {
      const { rise: then = rise } = other.modules[place] ?? {};
      return { least: Math.min(rise, then), most: Math.max(rise, then) };
    }),
  };
}

/** Then nothing would come of solving it: a limit that warmth has taken away altogether is no point on a curve. */
function hasLostALimit({ modules }: SimulatedCircuit, state: CircuitState): boolean {
  return state.modules.some(({ rise }, place) => {
    const module = modules[place];
    return module !== undefined && limitFactor(module, rise) === 0;
  });
}

function holds(calm: Calm, { modules }: CircuitState): boolean {
  return modules.every(({ rise, phase }, place) => {
    const range = calm.rises[place];
    return (
      phase.kind === calm.phases[place] && range !== undefined && rise >= range.least && rise <= range.most
    );
  });
}

/** Of which it must be seen what comes of it. */
function isAttemptBeginning({ modules }: SimulatedCircuit, state: CircuitState): boolean {
  return state.modules.some(({ phase }, place) => {
    const module = modules[place];
    return (
      module !== undefined &&
      phase.kind === 'retrying' &&
      attemptBegins(phase.since, periodOf(module), state.at)
    );
  });
}
