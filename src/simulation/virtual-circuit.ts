import type { LoadLaw } from '../circuit/load-law.js';
import type { Seconds } from '../quantity/quantity.js';
import { calmly } from './calm.js';
import type { CircuitState } from './circuit-state.js';
import { comingUp } from './coming-up.js';
import { goalPoint, meanSquareCurrents } from './goal-point.js';
import { firstFailing } from './first-failing.js';
import { isSameFor, outlook } from './outlook.js';
import type { RestingPoint, SimulatedCircuit } from './resting-point.js';
import { attempting, nextAttempt } from './retry.js';
import { settle, whileTrying, withNewAttempts } from './settle.js';
import type { Which } from './standing.js';
import { overloaded, periodOf } from './virtual-module.js';
import { longestHeld, warmed } from './warming.js';

/** Takes the input of some modules away; the others must carry everything. */
export function unpowered(
  circuit: SimulatedCircuit,
  state: CircuitState,
  law: LoadLaw,
  places: ReadonlySet<number>,
): CircuitState {
  const without = {
    ...state,
    modules: state.modules.map((module, place) =>
      places.has(place) ? { ...module, phase: { kind: 'off' } as const } : module,
    ),
  };
  return settle(circuit, without, law, whileTrying, () => voltagesOf(outputOf(circuit, state, law)));
}

/** Gives it back: they start from below, which clears a latch and may lock up on a load. */
export function powered(
  circuit: SimulatedCircuit,
  state: CircuitState,
  law: LoadLaw,
  places: ReadonlySet<number>,
): CircuitState {
  const starting = new Set([...places].filter((place) => state.modules[place]?.phase.kind === 'off'));
  const begun = {
    ...state,
    modules: state.modules.map((module, place) =>
      starting.has(place) ? { ...module, phase: { kind: 'limiting' } as const } : module,
    ),
  };
  const settled = settle(circuit, begun, law, whileTrying, () => voltagesOf(outputOf(circuit, state, law)));
  return {
    ...settled,
    modules: settled.modules.map((state, place) => {
      const module = circuit.modules[place];
      const hasFailed = starting.has(place) && state.phase.kind === 'limiting';
      return hasFailed && module !== undefined ? { ...state, phase: overloaded(module, settled.at) } : state;
    }),
  };
}

/** The load has changed: what was held may be too much now, what was too much may be held again. */
export function onNewLoad(
  circuit: SimulatedCircuit,
  state: CircuitState,
  before: LoadLaw,
  after: LoadLaw,
): CircuitState {
  return settle(circuit, state, after, whileTrying, () => voltagesOf(outputOf(circuit, state, before)));
}

/**
 * Carries a circuit on to a later moment on an unchanged load. Warming is first order and exact over any
 * length, and while a circuit is calm it is all there is; the moment a warming (or cooling) limit passes the
 * load is searched to a microsecond, so an hour costs no more than a second.
 */
export function advance(
  circuit: SimulatedCircuit,
  state: CircuitState,
  law: LoadLaw,
  until: Seconds,
): CircuitState {
  let now = state;
  while (now.at < until) now = calmly(circuit, now, law, until) ?? watched(circuit, now, law, until);
  return now;
}

/** Voltages and currents at the state's moment; the oscillation near the limit left out. */
export function outputOf(circuit: SimulatedCircuit, state: CircuitState, law: LoadLaw): RestingPoint {
  const goal = goalPoint(circuit, state, law, (since, period) => attempting(since, period, state.at));
  return comingUp(circuit, state, law, goal);
}

function voltagesOf({ modules }: RestingPoint): readonly number[] {
  return modules.map(({ voltage }) => voltage);
}

/** To the next moment at which a phase may change, at the longest to `until`, and what it comes to there. */
function watched(circuit: SimulatedCircuit, state: CircuitState, law: LoadLaw, until: Seconds): CircuitState {
  const then = stretch(circuit, state, law, until);
  return settle(circuit, then, law, withNewAttempts, () => voltagesOf(outputOf(circuit, state, law)));
}

/** One stretch in which no phase changes, at the longest to `until`. */
function stretch(circuit: SimulatedCircuit, state: CircuitState, law: LoadLaw, until: Seconds): CircuitState {
  const currents = meanSquareCurrents(circuit, state, law);
  const risen = (at: Seconds): CircuitState => warmed(circuit, state, currents, at);
  const could = outlook(circuit, state, law);
  const goal = Math.min(until, nextStart(circuit, state, could));
  const step = longestHeld(circuit);
  const isSteady = (): boolean =>
    meanSquareCurrents(circuit, risen(goal), law).every(
      (later, place) => Math.abs(later - (currents[place] ?? 0)) <= 1e-9 * (currents[place] ?? 0),
    );
  const end = goal <= state.at + step || isSteady() ? goal : state.at + step;
  const holds = (at: Seconds): boolean => isSameFor(outlook(circuit, risen(at), law), could);
  return risen(holds(end) ? end : firstFailing(holds, state.at, end));
}

/** When the next module tries that could be held. */
function nextStart({ modules }: SimulatedCircuit, state: CircuitState, could: Which): Seconds {
  return Math.min(
    Number.POSITIVE_INFINITY,
    ...state.modules.map(({ phase }, place) => {
      const module = modules[place];
      return module !== undefined && phase.kind === 'retrying' && could[place] === true
        ? nextAttempt(phase.since, periodOf(module), state.at)
        : Number.POSITIVE_INFINITY;
    }),
  );
}
