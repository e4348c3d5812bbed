import type { LoadLaw } from '../circuit/load-law.js';
import type { Seconds } from '../quantity/quantity.js';
import type { CircuitState } from './circuit-state.js';
import { comingUp } from './coming-up.js';
import { goalPoint, meanSquareCurrents } from './goal-point.js';
import { firstFailing } from './first-failing.js';
import type { RestingPoint, SimulatedCircuit } from './resting-point.js';
import { attempting, nextAttempt } from './retry.js';
import { atAnyTime, settle, whileTrying, withNewAttempts } from './settle.js';
import { overloaded, periodOf } from './virtual-module.js';
import { riseAfter, steadyRise } from './warming.js';

/** While current and warming act on each other, the currents are held for this share of the time constant. */
const STEPS_PER_TIME_CONSTANT = 20;

/** Takes the input of some modules away; the others must carry everything. */
export function unpowered(
  circuit: SimulatedCircuit,
  state: CircuitState,
  law: LoadLaw,
  places: ReadonlySet<number>,
): CircuitState {
  const from = voltagesOf(outputOf(circuit, state, law));
  const without = {
    ...state,
    modules: state.modules.map((module, place) =>
      places.has(place) ? { ...module, phase: { kind: 'off' } as const } : module,
    ),
  };
  return settle(circuit, without, law, from, whileTrying);
}

/** Gives it back: they start from below, which clears a latch and may lock up on a load. */
export function powered(
  circuit: SimulatedCircuit,
  state: CircuitState,
  law: LoadLaw,
  places: ReadonlySet<number>,
): CircuitState {
  const starting = new Set([...places].filter((place) => state.modules[place]?.phase.kind === 'off'));
  const from = voltagesOf(outputOf(circuit, state, law));
  const begun = {
    ...state,
    modules: state.modules.map((module, place) =>
      starting.has(place) ? { ...module, phase: { kind: 'limiting' } as const } : module,
    ),
  };
  const settled = settle(circuit, begun, law, from, whileTrying);
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
  return settle(circuit, state, after, voltagesOf(outputOf(circuit, state, before)), whileTrying);
}

/**
 * Carries a circuit on to a later moment on an unchanged load. Warming is first order and exact over any
 * length; the moment a warming (or cooling) limit passes the load is searched to a microsecond, so an
 * hour costs no more than a second.
 */
export function advance(
  circuit: SimulatedCircuit,
  state: CircuitState,
  law: LoadLaw,
  until: Seconds,
): CircuitState {
  let now = state;
  while (now.at < until) {
    const from = voltagesOf(outputOf(circuit, now, law));
    now = settle(circuit, stretch(circuit, now, law, until), law, from, withNewAttempts);
  }
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

/** One stretch in which no phase changes, at the longest to `until`. */
function stretch(circuit: SimulatedCircuit, state: CircuitState, law: LoadLaw, until: Seconds): CircuitState {
  const currents = meanSquareCurrents(circuit, state, law);
  const targets = circuit.modules.map((module, place) => steadyRise(module, currents[place] ?? 0));
  const risen = (at: Seconds): CircuitState => ({
    at,
    modules: circuit.modules.flatMap((module, place) => {
      const own = state.modules[place];
      if (own === undefined) return [];
      const rise = riseAfter(module, own.rise, targets[place] ?? 0, at - state.at);
      return [{ rise, phase: own.phase }];
    }),
  });
  const could = outlook(circuit, state, law);
  const goal = Math.min(until, nextStart(circuit, state, could));
  const isSteady = meanSquareCurrents(circuit, risen(goal), law).every(
    (later, place) => Math.abs(later - (currents[place] ?? 0)) <= 1e-9 * (currents[place] ?? 0),
  );
  const end = isSteady ? goal : Math.min(goal, state.at + step(circuit));
  const holds = (at: Seconds): boolean => {
    const then = outlook(circuit, risen(at), law);
    return then.every((is, place) => is === could[place]);
  };
  return risen(holds(end) ? end : firstFailing(holds, state.at, end));
}

function step({ modules }: SimulatedCircuit): Seconds {
  const constants = modules.flatMap(({ thermal }) => (thermal === undefined ? [] : [thermal.timeConstant]));
  return Math.min(Number.POSITIVE_INFINITY, ...constants) / STEPS_PER_TIME_CONSTANT;
}

/** What decides the phases, as warming moves it: which modules are held now, or could be if they tried? */
function outlook(circuit: SimulatedCircuit, state: CircuitState, law: LoadLaw): readonly boolean[] {
  return settle(circuit, state, law, [], atAnyTime).modules.map(({ phase }) => phase.kind === 'held');
}

/** When the next module tries that could be held. */
function nextStart({ modules }: SimulatedCircuit, state: CircuitState, could: readonly boolean[]): Seconds {
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
