import type { LoadLaw } from '../circuit/load-law.js';
import type { SimulatedModule } from '../files/simulation-section.js';
import type { Kelvins, Ratio, Seconds } from '../quantity/quantity.js';
import type { CircuitState } from './circuit-state.js';
import { type Asked, type Gives, goalsOn, isSamePoint } from './known-goals.js';
import { curveOf, leastHeldVoltage, startingCurveOf } from './module-curve-of.js';
import { type Part, type RestingPoint, type SimulatedCircuit, restingPoint } from './resting-point.js';
import { ATTEMPT_SHARE } from './retry.js';
import { staysAtItsLimit } from './standing.js';
import { type ModulePhase, delivers, periodOf } from './virtual-module.js';
import { limitFactor } from './warming.js';

/** Whether a module that first tripped at `since` is just trying. */
export type IsTrying = (since: Seconds, period: Seconds) => boolean;

/**
 * Where the circuit would rest with its modules in their present phases: held ones on their curves, collapsed
 * ones at what is left, those that try at their limit. In a group whose bus is held up an attempt that fails
 * and a module that has folded back give nothing.
 */
export function goalPoint(
  circuit: SimulatedCircuit,
  state: CircuitState,
  law: LoadLaw,
  isTrying: IsTrying,
): RestingPoint {
  const goals = goalsOn(law, circuit);
  const asked = askedOf(circuit, state, isTrying);
  const known = goals.find(asked);
  if (known !== undefined) return known;
  const parts = circuit.modules.map((module, place) =>
    partOf(module, state.modules[place]?.rise ?? 0, asked.gives[place] ?? 'nothing'),
  );
  const point =
    circuit.circuit === 'parallel' && !isHeldUp(circuit, state)
      ? withoutFailedAttempts(circuit, state, law, parts)
      : withoutLost(circuit, state, law, parts);
  goals.keep(asked, point);
  return point;
}

function askedOf(circuit: SimulatedCircuit, state: CircuitState, isTrying: IsTrying): Asked {
  const isUp = isHeldUp(circuit, state);
  const gives = circuit.modules.map((module, place) =>
    givesNow(module, state.modules[place]?.phase ?? { kind: 'off' }, isUp, isTrying),
  );
  return {
    gives,
    factors: circuit.modules.map((module, place) =>
      gives[place] === 'nothing' ? OF_NO_LIMIT : limitFactor(module, state.modules[place]?.rise ?? 0),
    ),
  };
}

/** Where a module gives nothing it does not matter how warm it is. */
const OF_NO_LIMIT: Ratio = 1;

/** Whether a bus is. */
function isHeldUp({ circuit }: SimulatedCircuit, { modules }: CircuitState): boolean {
  return circuit === 'parallel' && modules.some(({ phase }) => phase.kind === 'held');
}

function givesNow(module: SimulatedModule, phase: ModulePhase, isUp: boolean, isTrying: IsTrying): Gives {
  switch (phase.kind) {
    case 'held':
      return 'on its curve';
    case 'limiting':
      return isUp && !staysAtItsLimit(module) ? 'nothing' : 'from below';
    case 'retrying':
      return !isUp && isTrying(phase.since, periodOf(module)) ? 'from below' : 'nothing';
    case 'off':
    case 'latched':
      return 'nothing';
  }
}

function partOf(module: SimulatedModule, rise: Kelvins, gives: Gives): Part {
  switch (gives) {
    case 'on its curve':
      return { kind: 'curve', curve: curveOf(module, rise), from: 'above' };
    case 'from below':
      return { kind: 'curve', curve: startingCurveOf(module, rise), from: 'below' };
    case 'nothing':
      return { kind: 'nothing' };
  }
}

/**
 * Whether no limit has a part in where the circuit rests at one temperature and at another, be it trying or not;
 * then it rests there at all between them.
 */
export function isSteadyBetween(
  circuit: SimulatedCircuit,
  one: CircuitState,
  other: CircuitState,
  law: LoadLaw,
): boolean {
  const tries = one.modules.some(({ phase }) => phase.kind === 'retrying') ? [true, false] : [true];
  return tries.every((tries) => {
    const point = goalPoint(circuit, one, law, () => tries);
    if (
      !isSamePoint(
        point,
        goalPoint(circuit, other, law, () => tries),
      )
    )
      return false;
    const asked = askedOf(circuit, one, () => tries);
    goalsOn(law, circuit).keep(asked, point, askedOf(circuit, other, () => tries).factors);
    return true;
  });
}

/** What heats: the square of each module's current, averaged over the periods of those that keep trying. */
export function meanSquareCurrents(
  circuit: SimulatedCircuit,
  state: CircuitState,
  law: LoadLaw,
): readonly number[] {
  const trying = squares(goalPoint(circuit, state, law, () => true));
  if (state.modules.every(({ phase }) => phase.kind !== 'retrying')) return trying;
  const resting = squares(goalPoint(circuit, state, law, () => false));
  return trying.map((square, place) => {
    const rest = resting[place] ?? 0;
    return ATTEMPT_SHARE * square + (1 - ATTEMPT_SHARE) * rest;
  });
}

function squares({ modules }: RestingPoint): readonly number[] {
  return modules.map(({ current }) => current ** 2);
}

/** Held ones that hold no longer, in the moment before that is settled, give what they could give from below. */
function withoutLost(
  circuit: SimulatedCircuit,
  state: CircuitState,
  law: LoadLaw,
  parts: readonly Part[],
): RestingPoint {
  const point = restingPoint(circuit, parts, law);
  const isLost = parts.map((part, place) => {
    const module = circuit.modules[place];
    const rise = state.modules[place]?.rise ?? 0;
    if (module === undefined || part.kind === 'nothing' || part.from === 'below') return false;
    return !delivers(module, rise, point.modules[place]?.voltage ?? 0);
  });
  if (!isLost.includes(true)) return point;
  const fallen = circuit.modules.map((module, place): Part => {
    const curve = startingCurveOf(module, state.modules[place]?.rise ?? 0);
    return isLost[place] === true
      ? { kind: 'curve', curve, from: 'below' }
      : (parts[place] ?? { kind: 'nothing' });
  });
  return restingPoint(circuit, fallen, law);
}

/**
 * Several that try at once on one bus may lift it: then the one that is pushed past its limit trips there and
 * then, and the rest of its attempt is over.
 */
function withoutFailedAttempts(
  circuit: SimulatedCircuit,
  state: CircuitState,
  law: LoadLaw,
  attempted: readonly Part[],
): RestingPoint {
  const parts = [...attempted];
  for (;;) {
    const point = restingPoint(circuit, parts, law);
    let isLifted = false;
    let furthest: { readonly place: number; readonly past: number } | undefined;
    for (const [place, module] of circuit.modules.entries()) {
      const rise = state.modules[place]?.rise ?? 0;
      if (parts[place]?.kind !== 'curve') continue;
      const past = leastHeldVoltage(module, rise) - (point.modules[place]?.voltage ?? 0);
      if (delivers(module, rise, point.modules[place]?.voltage ?? 0)) isLifted = true;
      else if (state.modules[place]?.phase.kind === 'retrying' && past > (furthest?.past ?? 0))
        furthest = { place, past };
    }
    if (!isLifted || furthest === undefined) return point;
    parts[furthest.place] = { kind: 'nothing' };
  }
}
