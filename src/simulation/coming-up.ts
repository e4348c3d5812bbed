import { type LoadLaw, currentDrawn } from '../circuit/load-law.js';
import type { Seconds, Volts } from '../quantity/quantity.js';
import type { CircuitState } from './circuit-state.js';
import { shortedPlaces } from './earth-bonds.js';
import type { ModulePoint, RestingPoint, SimulatedCircuit } from './resting-point.js';

/** The output capacitors fill through the modules' limits: within 1 % after about 18 ms. */
const RECOVERY_TIME_CONSTANT: Seconds = 0.004;

/** Less than this is nothing. */
const NEGLIGIBLE: Volts = 1e-9;

/**
 * The point at the state's moment, on the way to the one where the circuit will rest. Whatever is missing of
 * the voltage, the load's law holds, and Kirchhoff's.
 */
export function comingUp(
  { circuit, modules }: SimulatedCircuit,
  state: CircuitState,
  law: LoadLaw,
  goal: RestingPoint,
): RestingPoint {
  const missing = state.modules.map(({ phase }, place) => {
    if (phase.kind !== 'held') return undefined;
    const end = goal.modules[place]?.voltage ?? 0;
    const left = (end - phase.from) * Math.exp(-(state.at - phase.since) / RECOVERY_TIME_CONSTANT);
    return left < NEGLIGIBLE ? 0 : left;
  });
  if (missing.every((volts) => volts === undefined || volts === 0)) return goal;
  if (circuit === 'series') return stackComingUp({ circuit, modules }, law, goal, missing);
  // The bus is as far up as the module that has come up furthest.
  const fromBus = missing.filter((volts) => volts !== undefined);
  return busComingUp({ circuit, modules }, law, goal, Math.min(...fromBus));
}

function busComingUp(
  { circuit, modules }: SimulatedCircuit,
  law: LoadLaw,
  goal: RestingPoint,
  missing: Volts,
): RestingPoint {
  if (missing === 0) return goal;
  const voltage = goal.voltage - missing;
  const current = Math.min(goal.current, currentDrawn(law, voltage));
  const share = goal.current > 0 ? current / goal.current : 0;
  return {
    voltage,
    current,
    modules: goal.modules.map((point, place): ModulePoint => {
      if (circuit === 'single') return { voltage, current, through: 0 };
      const own = point.current * share;
      return { voltage: voltage + own * (modules[place]?.ballast ?? 0), current: own, through: own };
    }),
  };
}

function stackComingUp(
  { modules }: SimulatedCircuit,
  law: LoadLaw,
  goal: RestingPoint,
  missing: readonly (Volts | undefined)[],
): RestingPoint {
  const shorted = shortedPlaces(modules);
  const rising = goal.modules.map((point, place) =>
    shorted.has(place) ? point : { ...point, voltage: point.voltage - (missing[place] ?? 0) },
  );
  const feeding = [...modules.entries()].filter(([place]) => !shorted.has(place));
  const resistance = feeding.reduce((sum, [, { ballast }]) => sum + ballast, 0);
  const inside = feeding.reduce((sum, [place]) => sum + (rising[place]?.voltage ?? 0), 0);
  const drawn = currentDrawn(behind(law, resistance), Math.max(0, inside));
  const current = Math.min(goal.current, drawn);
  return {
    voltage: inside - current * resistance,
    current,
    modules: rising.map((point, place): ModulePoint => {
      if (shorted.has(place)) return point;
      return { ...point, current: Math.min(point.current, current), through: current };
    }),
  };
}

/** The same load, seen through the resistance of the stack. */
function behind(law: LoadLaw, resistance: number): LoadLaw {
  return law.kind === 'open' ? law : { ...law, leads: law.leads + resistance };
}
