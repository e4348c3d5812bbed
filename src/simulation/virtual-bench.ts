import type { LoadLaw } from '../circuit/load-law.js';
import type { SimulatedFault, SimulatedModule, Simulation } from '../files/simulation-section.js';
import type { Amperes, Celsius, Kelvins, Ohms, Seconds, Volts } from '../quantity/quantity.js';
import { earthResistanceOf } from './earth-bonds.js';
import { rippleOf } from './ripple.js';
import { UnknownModuleError } from './unknown-module-error.js';
import { type LoadHardware, type LoadState, lawOf, loadAtRest, trips } from './virtual-load.js';
import {
  type ModulePhase,
  type ModuleState,
  advance,
  freshModule,
  onNewLoad,
  outputOf,
  powered,
  unpowered,
} from './virtual-module.js';

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

/** Told when somebody has changed something: what stood just before and what stands just after. */
export type StepListener = (before: Moment, after: Moment) => void;

/** What goes wrong with the module or its wires by itself, at a time. */
export interface WorldFault extends SimulatedFault {
  readonly what: 'module-dead' | 'reversed';
}

/** The temperature around a module for which none is given. */
const USUAL_AMBIENT: Celsius = 23;

export type InputState = 'present' | 'absent' | 'dead';

/**
 * The world: one module, leads and a load. Its time is seconds since it was made. It is folded forward from
 * act to act; between acts it can be looked at for any moment without being changed, which is how a
 * reading that takes a while sees the output move.
 */
export class VirtualBench {
  readonly circuit: Simulation['circuit'];
  /** In the order of the circuit. */
  readonly modules: readonly SimulatedModule[];
  readonly #hardware: LoadHardware;
  readonly #listeners: StepListener[] = [];
  #load: LoadState = loadAtRest;
  #law: LoadLaw;
  #state: ModuleState;
  readonly #inputs: InputState[];
  #reversed = false;
  readonly #faults: WorldFault[];

  constructor(
    { circuit, modules }: Pick<Simulation, 'circuit' | 'modules'>,
    hardware: LoadHardware,
    faults: readonly WorldFault[] = [],
  ) {
    this.circuit = circuit;
    this.modules = modules;
    this.#inputs = modules.map(() => 'present');
    this.#hardware = hardware;
    this.#law = lawOf(loadAtRest, hardware);
    this.#faults = faults.toSorted((one, other) => one.at - other.at);
    this.#state = freshModule(0);
  }

  /** The first module. */
  get module(): SimulatedModule {
    const [first] = this.modules;
    if (first === undefined) throw new UnknownModuleError({ module: '1', modules: [] });
    return first;
  }

  get load(): LoadState {
    return this.#load;
  }

  /**
   * A module's input: `dead` is a fault that nobody can undo.
   * @throws UnknownModuleError
   */
  inputOf(name: string): InputState {
    return this.#inputs[this.#placeOf(name)] ?? 'absent';
  }

  /**
   * What an ohmmeter finds between earth and a module's output 0 V, by that module alone: some milliohms
   * where it is bonded, `Infinity` where it is isolated.
   * @throws UnknownModuleError
   */
  earthResistance(name: string): Ohms {
    return earthResistanceOf(this.modules[this.#placeOf(name)] ?? this.module);
  }

  onStep(listener: StepListener): void {
    this.#listeners.push(listener);
  }

  /** Sets the load; what its protection does about it happens at once. */
  setLoad(change: Partial<LoadState>, at: Seconds): void {
    this.#act(at, () => {
      this.#takeLoad({ ...this.#load, ...change });
      const { loadVoltage, current } = this.#momentOf(this.#state);
      if (trips(this.#load, loadVoltage, current)) this.#takeLoad({ ...this.#load, input: 'off' });
    });
  }

  /**
   * Plugs a module in or out, or all of them when none is named.
   * @throws UnknownModuleError
   */
  setInput(input: 'present' | 'absent', at: Seconds, name?: string): void {
    const places = name === undefined ? [...this.modules.keys()] : [this.#placeOf(name)];
    const changing = places.filter((place) => this.#inputs[place] !== 'dead');
    if (changing.length === 0) return;
    this.#act(at, () => {
      for (const place of changing) this.#inputs[place] = input;
      this.#state =
        input === 'present' ? powered(this.module, this.#state, this.#law) : unpowered(this.#state);
    });
  }

  /**
   * Looks at several moments in rising order, without changing anything. Moments before the last act are
   * seen as just after it.
   */
  look(moments: readonly Seconds[]): readonly Moment[] {
    // Time itself is carried on to the first moment, so that looking often does not recount the past.
    const [first] = moments;
    if (first !== undefined) this.#carryOn(first);
    let state = this.#state;
    return moments.map((at) => {
      state = advance(this.module, state, this.#law, at);
      return this.#momentOf(state);
    });
  }

  #act(at: Seconds, change: () => void): void {
    this.#carryOn(at);
    const before = this.#momentOf(this.#state);
    change();
    const after = this.#momentOf(this.#state);
    for (const listener of this.#listeners) listener(before, after);
  }

  #carryOn(at: Seconds): void {
    for (let fault = this.#faults[0]; fault !== undefined && fault.at <= at; fault = this.#faults[0]) {
      this.#faults.shift();
      this.#suffer(fault);
    }
    this.#state = advance(this.module, this.#state, this.#law, at);
  }

  /** Dead stays dead. Reversed, no current is sunk and every voltage is negative. */
  #suffer({ at, what }: WorldFault): void {
    this.#act(at, () => {
      switch (what) {
        case 'module-dead':
          this.#inputs[0] = 'dead';
          this.#state = unpowered(this.#state);
          break;
        case 'reversed':
          this.#reversed = true;
          this.#takeLoad(this.#load);
      }
    });
  }

  #takeLoad(load: LoadState): void {
    const before = this.#law;
    this.#load = load;
    this.#law = this.#reversed ? { kind: 'open' } : lawOf(load, this.#hardware);
    this.#state = onNewLoad(this.module, this.#state, before, this.#law);
  }

  #placeOf(name: string): number {
    const place = this.modules.findIndex((module) => module.name === name);
    if (place >= 0) return place;
    throw new UnknownModuleError({ module: name, modules: this.modules.map((module) => module.name) });
  }

  #momentOf(state: ModuleState): Moment {
    const { voltage, current } = outputOf(this.module, state, this.#law);
    const sign = this.#reversed ? -1 : 1;
    const phase = state.phase.kind;
    const ripple = phase === 'held' ? sign * rippleOf(this.module, state.rise, current, state.at) : 0;
    const common = {
      rise: state.rise,
      temperature: (this.module.thermal?.ambient ?? USUAL_AMBIENT) + state.rise,
      phase,
      ripple,
      noise: phase === 'off' || phase === 'latched' ? 0 : this.module.noise,
    };
    return {
      at: state.at,
      moduleVoltage: sign * voltage,
      loadVoltage: sign * (voltage - current * this.#hardware.leads),
      current,
      ...common,
      modules: [
        {
          name: this.module.name,
          voltage: sign * voltage,
          current,
          ballastVoltage: 0,
          ballastRipple: 0,
          ballastNoise: 0,
          ...common,
        },
      ],
    };
  }
}
