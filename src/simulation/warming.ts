import type { SimulatedModule } from '../files/simulation-section.js';
import type { Amperes, Kelvins, Ratio, Seconds } from '../quantity/quantity.js';
import type { CircuitState } from './circuit-state.js';
import type { SimulatedCircuit } from './resting-point.js';

/** A bench is seldom told its rated current; a maker leaves about a quarter between label and limit. */
const RATED_SHARE_OF_LIMIT = 0.75;

/** The rise toward which a steady current heats the module: as its square, being loss in resistance. */
export function steadyRise(module: SimulatedModule, meanSquareCurrent: number): Kelvins {
  if (module.thermal === undefined) return 0;
  const rated: Amperes = module.ratedCurrent ?? RATED_SHARE_OF_LIMIT * module.limit.current;
  return (module.thermal.riseAtRated * meanSquareCurrent) / (rated * rated);
}

/** The rise after a time at a steady current: first order, exact whatever the length of the step. */
export function riseAfter(
  module: SimulatedModule,
  rise: Kelvins,
  target: Kelvins,
  elapsed: Seconds,
): Kelvins {
  if (module.thermal === undefined) return 0;
  return target + (rise - target) * Math.exp(-elapsed / module.thermal.timeConstant);
}

/** What warming multiplies the limit by. */
export function limitFactor(module: SimulatedModule, rise: Kelvins): Ratio {
  if (module.thermal === undefined) return 1;
  return Math.max(0, 1 + module.thermal.limitPerKelvin * rise);
}

/** The circuit at a later moment, warmed by steady currents, of which the mean squares are given; no phase changes. */
export function warmed(
  { modules }: SimulatedCircuit,
  state: CircuitState,
  meanSquareCurrents: readonly number[],
  at: Seconds,
): CircuitState {
  return {
    at,
    modules: state.modules.map(({ rise, phase }, place) => {
      const module = modules[place];
      if (module === undefined) return { rise, phase };
      const target = steadyRise(module, meanSquareCurrents[place] ?? 0);
      return { rise: riseAfter(module, rise, target, at - state.at), phase };
    }),
  };
}

/** While current and warming act on each other, the currents are held for this share of the time constant. */
const STEPS_PER_TIME_CONSTANT = 20;

/** For how long currents that move with the temperatures may be taken for steady. */
export function longestHeld({ modules }: SimulatedCircuit): Seconds {
  const constants = modules.flatMap(({ thermal }) => (thermal === undefined ? [] : [thermal.timeConstant]));
  return Math.min(Number.POSITIVE_INFINITY, ...constants) / STEPS_PER_TIME_CONSTANT;
}
