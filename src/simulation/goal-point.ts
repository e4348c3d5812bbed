import type { LoadLaw } from '../circuit/load-law.js';
import type { Seconds } from '../quantity/quantity.js';
import type { CircuitState } from './circuit-state.js';
import { curveOf, leastHeldVoltage, startingCurveOf } from './module-curve-of.js';
import { type Part, type RestingPoint, type SimulatedCircuit, restingPoint } from './resting-point.js';
import { ATTEMPT_SHARE } from './retry.js';
import { delivers, periodOf } from './virtual-module.js';

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
  const parts = circuit.modules.map((module, place): Part => {
    const { rise = 0, phase = undefined } = state.modules[place] ?? {};
    switch (phase?.kind) {
      case 'held':
        return { kind: 'curve', curve: curveOf(module, rise), from: 'above' };
      case 'limiting':
        return isHeldUp && module.limit.style !== 'constant-current'
          ? { kind: 'nothing' }
          : { kind: 'curve', curve: startingCurveOf(module, rise), from: 'below' };
      case 'retrying':
        return !isHeldUp && isTrying(phase.since, periodOf(module))
          ? { kind: 'curve', curve: startingCurveOf(module, rise), from: 'below' }
          : { kind: 'nothing' };
      case 'off':
      case 'latched':
      case undefined:
        return { kind: 'nothing' };
    }
  });
  return circuit.circuit === 'parallel' && !isHeldUp
    ? withoutFailedAttempts(circuit, state, law, parts)
    : withoutLost(circuit, state, law, parts);
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
  let isLost = false;
  const fallen = parts.map((part, place): Part => {
    const module = circuit.modules[place];
    const rise = state.modules[place]?.rise ?? 0;
    if (module === undefined || part.kind === 'nothing' || part.from === 'below') return part;
    if (delivers(module, rise, point.modules[place]?.voltage ?? 0)) return part;
    isLost = true;
    return { kind: 'curve', curve: startingCurveOf(module, rise), from: 'below' };
  });
  return isLost ? restingPoint(circuit, fallen, law) : point;
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
