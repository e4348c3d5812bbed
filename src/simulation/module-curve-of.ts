import { type ModuleCurve, knee, withLimitScaled } from '../circuit/module-curve.js';
import type { SimulatedModule } from '../files/simulation-section.js';
import type { Kelvins, Ohms, Ratio, Volts } from '../quantity/quantity.js';
import { limitFactor } from './warming.js';

/**
 * A constant-power module gives up when its output falls to this share of open circuit: its own
 * under-voltage shutdown, which stands near half to two thirds in practice.
 */
export const SHUTDOWN_SHARE: Ratio = 0.6;

/** What is across the output of a module that gives nothing: the resistor that discharges its capacitors. */
export const BLEEDER: Ohms = 2200;

/** The curve a module follows while it is trying, at a rise of temperature. */
export function curveOf(module: SimulatedModule, rise: Kelvins): ModuleCurve {
  const { openCircuitVoltage, droopResistance, limit } = module;
  const cold: ModuleCurve = {
    openCircuitVoltage,
    droopResistance,
    limit:
      limit.style === 'foldback'
        ? { style: 'foldback', current: limit.current, shortCircuit: limit.shortCircuit }
        : {
            style: limit.style === 'constant-power' ? 'constant-power' : 'constant-current',
            current: limit.current,
          },
  };
  return withLimitScaled(cold, limitFactor(module, rise));
}

/** What it can give while starting into an overload: nobody holds a constant power near 0 V. */
export function startingCurveOf(module: SimulatedModule, rise: Kelvins): ModuleCurve {
  const curve = curveOf(module, rise);
  return curve.limit.style === 'constant-power'
    ? { ...curve, limit: { style: 'constant-current', current: curve.limit.current } }
    : curve;
}

/** The lowest voltage that still counts as delivering: the knee, or where a constant-power module shuts down. */
export function leastHeldVoltage(module: SimulatedModule, rise: Kelvins): Volts {
  return module.limit.style === 'constant-power'
    ? SHUTDOWN_SHARE * module.openCircuitVoltage
    : knee(curveOf(module, rise)).voltage;
}
