import type { LoadLaw } from '../circuit/load-law.js';
import type { Ratio, Volts } from '../quantity/quantity.js';
import type { CircuitState } from './circuit-state.js';
import { curveOf } from './module-curve-of.js';
import { type Part, type SimulatedCircuit, restingPoint } from './resting-point.js';
import { attemptBegins, attempting } from './retry.js';
import { type Standing, type Which, standingOf, staysAtItsLimit } from './standing.js';
import { type ModulePhase, delivers, overloaded, periodOf } from './virtual-module.js';

/** Which of the modules that keep trying may start now. */
export type Tries = (circuit: SimulatedCircuit, state: CircuitState) => Which;

/** Once its load has eased, a module that retries starts whenever it tries. */
export const whileTrying: Tries = (circuit, state) =>
  retrying(circuit, state, (since, period) => attempting(since, period, state.at));

/**
 * Having merely cooled by a hair, only with a new attempt: else it would start and trip without end within
 * one. One that is just trying starts with another's new attempt, which may be what it lacked.
 */
export const withNewAttempts: Tries = (circuit, state) => {
  const beginning = retrying(circuit, state, (since, period) => attemptBegins(since, period, state.at));
  return beginning.includes(true) ? whileTrying(circuit, state) : beginning;
};

/** As if all tried at once: what could be. */
export const atAnyTime: Tries = (circuit, state) => retrying(circuit, state, () => true);

function retrying(
  { modules }: SimulatedCircuit,
  state: CircuitState,
  may: (since: number, period: number) => boolean,
): Which {
  return modules.map((module, place) => {
    const phase = state.modules[place]?.phase;
    return phase?.kind === 'retrying' && may(phase.since, periodOf(module));
  });
}

/**
 * Applies at once what follows from the present load and temperatures: who is pushed past its limit, whom
 * that pushes past theirs, who can come back. `from` says which voltages the modules had, where one comes up.
 */
export function settle(
  circuit: SimulatedCircuit,
  state: CircuitState,
  law: LoadLaw,
  tries: Tries,
  from: () => readonly Volts[],
): CircuitState {
  const rises = state.modules.map(({ rise }) => rise);
  const feeding = circuit.modules.map((module, place) => {
    const kind = state.modules[place]?.phase.kind;
    return kind === 'held' || (kind === 'limiting' && staysAtItsLimit(module));
  });
  let standing = standingOf(circuit, rises, feeding, law);
  const trying = tries(circuit, state);
  if (trying.includes(true)) {
    const withThem = standingOf(circuit, rises, either(standing.members, trying), law);
    if (withThem.delivering.some((is, place) => is && trying[place] === true)) standing = withThem;
  }
  const back = comingBack(circuit, state, standing, law);
  if (back.includes(true)) standing = standingOf(circuit, rises, either(standing.members, back), law);
  return {
    at: state.at,
    modules: state.modules.map((module, place) => ({
      rise: module.rise,
      phase: phaseIn(circuit, state, standing, place, from) ?? module.phase,
    })),
  };
}

/** Undefined for one whose phase stays as it is. */
function phaseIn(
  { modules }: SimulatedCircuit,
  state: CircuitState,
  { delivering }: Standing,
  place: number,
  from: () => readonly Volts[],
): ModulePhase | undefined {
  const module = modules[place];
  const isHeld = state.modules[place]?.phase.kind === 'held';
  if (module === undefined || isHeld === delivering[place]) return undefined;
  return isHeld ? overloaded(module, state.at) : { kind: 'held', since: state.at, from: from()[place] ?? 0 };
}

/**
 * Beside others that hold the bus a module that has folded back, and has since cooled by a hair, would come
 * back and go again without end; it needs this much room below its limit.
 */
const ROOM_TO_COME_BACK: Ratio = 0.02;

/**
 * Of the modules that rest collapsed, those that come up again. Coming from below, even the lowest point at
 * which they could rest must be one at which they deliver.
 */
function comingBack(circuit: SimulatedCircuit, state: CircuitState, standing: Standing, law: LoadLaw): Which {
  const rises = state.modules.map(({ rise }) => rise);
  let candidates: Which = circuit.modules.map(
    (module, place) => state.modules[place]?.phase.kind === 'limiting' && !staysAtItsLimit(module),
  );
  while (candidates.includes(true)) {
    const { members } = standingOf(circuit, rises, either(standing.members, candidates), law);
    const parts = circuit.modules.map((module, place): Part => {
      if (members[place] !== true) return { kind: 'nothing' };
      const from = standing.delivering[place] === true ? 'above' : 'below';
      return { kind: 'curve', curve: curveOf(module, rises[place] ?? 0), from };
    });
    const point = restingPoint(circuit, parts, law);
    const isBesideOthers = circuit.circuit === 'parallel' && standing.delivering.includes(true);
    const able = circuit.modules.map((module, place) => {
      const { voltage = 0, current = 0 } = point.modules[place] ?? {};
      const rise = rises[place] ?? 0;
      if (candidates[place] !== true || members[place] !== true) return false;
      if (!delivers(module, rise, voltage)) return false;
      if (!isBesideOthers || module.limit.style !== 'foldback') return true;
      return current <= (1 - ROOM_TO_COME_BACK) * curveOf(module, rise).limit.current;
    });
    if (able.every((is, place) => is === candidates[place])) break;
    candidates = able;
  }
  return candidates;
}

function either(some: Which, others: Which): Which {
  return some.map((is, place) => is || others[place] === true);
}
