import { imbalanceOf } from '../circuit/imbalance.js';
import type { LoadLaw } from '../circuit/load-law.js';
import { railVoltages } from '../circuit/rail-voltages.js';
import type { Simulation } from '../files/simulation-section.js';
import type { Amperes, Kelvins, Ratio, Volts } from '../quantity/quantity.js';
import { type CircuitState, freshCircuit } from './circuit-state.js';
import { goalPoint } from './goal-point.js';
import type { RestingPoint } from './resting-point.js';
import { settle } from './settle.js';

/** What a perfect measurement would find of a whole circuit that stands when its load is raised. */
export interface TrueCircuit {
  /** At the output of the whole. */
  readonly openCircuitVoltage: Volts;
  /** At a load: the voltage at the output, some or no volts where it no longer holds. */
  readonly voltageAt: (load: Amperes) => Volts;
  /** The current through each module, in the order of the circuit. */
  readonly currentsAt: (load: Amperes) => readonly Amperes[];
  /** (I_max − I_min)/I_mean. */
  readonly imbalanceAt: (load: Amperes) => Ratio;
  /** At each module's own output. */
  readonly moduleVoltagesAt: (load: Amperes) => readonly Volts[];
  /** What each module's 0 V rail floats at above the 0 V of the lowest. */
  readonly railVoltagesAt: (load: Amperes) => readonly Volts[];
  /** The smallest load at which the output has sagged by the share of the open-circuit voltage, or is gone. */
  readonly dropoutCurrent: (sag: Ratio) => Amperes;
  /** The module that is the first at its limit, or past it, as the load rises, and the load at which it is. */
  readonly firstAtItsLimit: { readonly module: string; readonly load: Amperes } | undefined;
}

/** Bisection ends here. */
const RESOLUTION: Amperes = 1e-9;

/** More than any module gives: one of constant power gives its limit over the share at which it shuts down. */
const MOST_OVER_LIMIT: Ratio = 2;

/**
 * The truth about a simulated circuit, on a load that was raised from nothing, at the rises of its modules'
 * temperatures (cold when left out). A module that is pushed past its limit has left by then if it does.
 */
export function trueCircuit(
  { circuit, modules, leads }: Pick<Simulation, 'circuit' | 'modules' | 'leads'>,
  rises: readonly Kelvins[] = [],
): TrueCircuit {
  const whole = { circuit, modules };
  const fresh = freshCircuit(modules, 0);
  const standing = {
    at: 0,
    modules: fresh.modules.map((one, place) => ({ ...one, rise: rises[place] ?? 0 })),
  };
  const most = MOST_OVER_LIMIT * modules.reduce((sum, { limit }) => sum + limit.current, 0);
  const at = (load: Amperes): { readonly state: CircuitState; readonly point: RestingPoint } => {
    const law: LoadLaw =
      load > 0 ? { kind: 'current', current: load, leastVoltage: 0, leads } : { kind: 'open' };
    const state = settle(
      whole,
      standing,
      law,
      () => modules.map(() => false),
      () => [],
    );
    return { state, point: goalPoint(whole, state, law, () => false) };
  };
  const openCircuitVoltage = at(0).point.voltage;
  const deliveringAt = (load: Amperes): readonly boolean[] =>
    at(load).state.modules.map(({ phase }) => phase.kind === 'held');
  const unloaded = deliveringAt(0);
  const loadOfFirst = firstLoad(
    (load) => deliveringAt(load).every((is, place) => is === unloaded[place]),
    most,
  );
  const first =
    loadOfFirst === undefined
      ? undefined
      : modules.find((_, place) => unloaded[place] === true && deliveringAt(loadOfFirst)[place] === false);
  return {
    openCircuitVoltage,
    voltageAt: (load) => at(load).point.voltage,
    currentsAt: (load) => at(load).point.modules.map(({ current }) => current),
    imbalanceAt: (load) => imbalanceOf(at(load).point.modules.map(({ current }) => current)),
    moduleVoltagesAt: (load) => at(load).point.modules.map(({ voltage }) => voltage),
    railVoltagesAt: (load) => {
      const { point } = at(load);
      return railVoltages(
        modules.map(({ ballast }, place) => {
          const { voltage = 0, through = 0 } = point.modules[place] ?? {};
          return circuit === 'series' ? voltage - through * ballast : 0;
        }),
      );
    },
    dropoutCurrent: (sag) => {
      const least = (1 - sag) * openCircuitVoltage;
      return firstLoad((load) => at(load).point.voltage > least, most) ?? most;
    },
    firstAtItsLimit:
      first === undefined || loadOfFirst === undefined
        ? undefined
        : { module: first.name, load: loadOfFirst },
  };
}

/** The smallest load from which something no longer holds; undefined where it always does. */
function firstLoad(holds: (load: Amperes) => boolean, most: Amperes): Amperes | undefined {
  if (holds(most)) return undefined;
  let good = 0;
  let bad = most;
  while (bad - good > RESOLUTION) {
    const middle = (good + bad) / 2;
    if (holds(middle)) good = middle;
    else bad = middle;
  }
  return bad;
}
