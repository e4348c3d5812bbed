import type { LoadLaw } from '../circuit/load-law.js';
import type { SimulatedModule } from '../files/simulation-section.js';
import type { Kelvins, Ratio, Seconds } from '../quantity/quantity.js';
import type { CircuitState } from './circuit-state.js';
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
  const isHeldUp = circuit.circuit === 'parallel' && state.modules.some(({ phase }) => phase.kind === 'held');
  const gives = circuit.modules.map((module, place) =>
    givesNow(module, state.modules[place]?.phase ?? { kind: 'off' }, isHeldUp, isTrying),
  );
  const factors = circuit.modules.map((module, place) =>
    limitFactor(module, state.modules[place]?.rise ?? 0),
  );
  const last = lastGoal.get(law);
  if (last?.circuit === circuit && isSame(last.gives, gives) && isSame(last.factors, factors))
    return last.point;
  const parts = circuit.modules.map((module, place) =>
    partOf(module, state.modules[place]?.rise ?? 0, gives[place] ?? 'nothing'),
  );
  const point =
    circuit.circuit === 'parallel' && !isHeldUp
      ? withoutFailedAttempts(circuit, state, law, parts)
      : withoutLost(circuit, state, law, parts);
  lastGoal.set(law, { circuit, gives, factors, point });
  return point;
}

type Gives = 'on its curve' | 'from below' | 'nothing';

function givesNow(module: SimulatedModule, phase: ModulePhase, isHeldUp: boolean, isTrying: IsTrying): Gives {
  switch (phase.kind) {
    case 'held':
      return 'on its curve';
    case 'limiting':
      return isHeldUp && !staysAtItsLimit(module) ? 'nothing' : 'from below';
    case 'retrying':
      return !isHeldUp && isTrying(phase.since, periodOf(module)) ? 'from below' : 'nothing';
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

/** Asked again and again of one moment and of the next, so the last answer is kept. */
const lastGoal = new WeakMap<
  LoadLaw,
  {
    readonly circuit: SimulatedCircuit;
    readonly gives: readonly Gives[];
    /** Of a rise only what it does to the limit counts. */
    readonly factors: readonly Ratio[];
    readonly point: RestingPoint;
  }
>();

function isSame(some: readonly unknown[], others: readonly unknown[]): boolean {
  return some.every((one, place) => one === others[place]);
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
