import type { Amperes, Celsius, Kelvins, Ohms, Seconds, Volts } from '../quantity/quantity.js';
import type { CircuitState } from './circuit-state.js';
import { type Disturbance, disturbances } from './disturbance.js';
import type { RestingPoint, SimulatedCircuit } from './resting-point.js';
import type { ModulePhase } from './virtual-module.js';

/** What is really there at one moment: the truth that the instruments read with their errors. */
export interface Moment {
  readonly at: Seconds;
  /** At the output of the whole: the module's own, the bus of a group, the top of a stack. */
  readonly moduleVoltage: Volts;
  readonly loadVoltage: Volts;
  /** Of the load. */
  readonly current: Amperes;
  /** In the order of the circuit. */
  readonly modules: readonly ModuleMoment[];
  /** Of the first module. */
  readonly rise: Kelvins;
  /** Of the first module. */
  readonly temperature: Celsius;
  /** Of the module that is doing most: held before limiting, retrying, latched and off. */
  readonly phase: ModulePhase['kind'];
  /** What the oscillation near the limit adds to both voltages. */
  readonly ripple: Volts;
  /** Standard deviation of the noise of both voltages. */
  readonly noise: Volts;
}

/** One module of the circuit. Its ripple and noise are what a meter finds beside what it means to read. */
export interface ModuleMoment {
  readonly name: string;
  /** At its own output. */
  readonly voltage: Volts;
  /** Through it. */
  readonly current: Amperes;
  /** Across its series resistor, as a meter sees it with + toward the module. */
  readonly ballastVoltage: Volts;
  readonly rise: Kelvins;
  readonly temperature: Celsius;
  readonly phase: ModulePhase['kind'];
  /** Added to its voltage. */
  readonly ripple: Volts;
  /** Added to the voltage across its series resistor. */
  readonly ballastRipple: Volts;
  /** Standard deviation, at its own output. */
  readonly noise: Volts;
  /** Standard deviation, across its series resistor. */
  readonly ballastNoise: Volts;
}

/** The temperature around a module for which none is given. */
const USUAL_AMBIENT: Celsius = 23;

/** What a moment is made of. */
export interface MomentFacts {
  readonly circuit: SimulatedCircuit;
  readonly state: CircuitState;
  readonly point: RestingPoint;
  readonly leads: Ohms;
  /** −1 where the leads at the output are swapped. */
  readonly sign: 1 | -1;
}

export function momentOf(facts: MomentFacts): Moment {
  const { state, point, leads, sign } = facts;
  const { output, modules: own } = disturbances(facts.circuit, state, point, state.at);
  const modules = facts.circuit.modules.map((module, place): ModuleMoment => {
    const { rise = 0, phase } = state.modules[place] ?? {};
    const { voltage = 0, current = 0, through = 0 } = point.modules[place] ?? {};
    const disturbed = own[place] ?? { own: none, ballast: none };
    return {
      name: module.name,
      voltage: sign * voltage,
      current,
      ballastVoltage: sign * through * module.ballast,
      rise,
      temperature: (module.thermal?.ambient ?? USUAL_AMBIENT) + rise,
      phase: phase?.kind ?? 'off',
      ripple: sign * disturbed.own.ripple,
      ballastRipple: sign * disturbed.ballast.ripple,
      noise: disturbed.own.noise,
      ballastNoise: disturbed.ballast.noise,
    };
  });
  return {
    at: state.at,
    moduleVoltage: sign * point.voltage,
    loadVoltage: sign * (point.voltage - point.current * leads),
    current: point.current,
    modules,
    rise: modules[0]?.rise ?? 0,
    temperature: modules[0]?.temperature ?? USUAL_AMBIENT,
    phase: liveliest(modules),
    ripple: sign * output.ripple,
    noise: output.noise,
  };
}

const none: Disturbance = { ripple: 0, noise: 0 };

function liveliest(modules: readonly ModuleMoment[]): ModulePhase['kind'] {
  const order = ['held', 'limiting', 'retrying', 'latched'] as const;
  return order.find((kind) => modules.some(({ phase }) => phase === kind)) ?? 'off';
}
