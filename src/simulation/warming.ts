import type { SimulatedModule } from '../files/simulation-section.js';
import type { Amperes, Kelvins, Ratio, Seconds } from '../quantity/quantity.js';

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
