import { currentAtSag, knee } from '../circuit/module-curve.js';
import type { SimulatedModule, Simulation } from '../files/simulation-section.js';
import type { Amperes, Kelvins, Ohms, Ratio, Volts } from '../quantity/quantity.js';
import { SHUTDOWN_SHARE, curveOf } from './module-curve-of.js';
import { unsteadyAboveOf } from './ripple.js';
import { steadyRise } from './warming.js';

/** What a perfect measurement would find. */
export interface TrueValues {
  readonly openCircuitVoltage: Volts;
  readonly droopResistance: Ohms;
  readonly leadResistance: Ohms;
  /** Where the regulated line ends. */
  readonly limitOnsetCurrent: Amperes;
  readonly unsteadyAboveCurrent: Amperes | undefined;
  /** Delivered into a dead short; undefined for a module that shuts down instead. */
  readonly shortCircuitCurrent: Amperes | undefined;
  readonly limitStyle: SimulatedModule['limit']['style'];
  /** The smallest current at which the voltage has sagged by the share of the open-circuit voltage. */
  readonly dropoutCurrent: (sag: Ratio) => Amperes;
  /** Above the air, after a long time at a current. */
  readonly settledRise: (current: Amperes) => Kelvins;
}

/** The truth about a simulated module, at a rise of its temperature above ambient (cold when left out). */
export function trueValues(
  simulation: Pick<Simulation, 'leads'>,
  module: SimulatedModule,
  rise: Kelvins = 0,
): TrueValues {
  const curve = curveOf(module, rise);
  return {
    openCircuitVoltage: module.openCircuitVoltage,
    droopResistance: module.droopResistance,
    leadResistance: simulation.leads,
    limitOnsetCurrent: knee(curve).current,
    unsteadyAboveCurrent: unsteadyAboveOf(module, rise),
    shortCircuitCurrent: shortCircuitCurrent(curve),
    limitStyle: module.limit.style,
    dropoutCurrent: (sag) =>
      currentAtSag(curve, module.limit.style === 'constant-power' ? Math.min(sag, 1 - SHUTDOWN_SHARE) : sag),
    settledRise: (current) => steadyRise(module, current ** 2),
  };

  function shortCircuitCurrent({ limit }: typeof curve): Amperes | undefined {
    if (module.limit.style === 'constant-current') return limit.current;
    return limit.style === 'foldback' ? limit.shortCircuit : undefined;
  }
}
