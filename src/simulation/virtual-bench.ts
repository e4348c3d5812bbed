import type { LoadLaw } from '../circuit/load-law.js';
import type { SimulatedFault, SimulatedModule, Simulation } from '../files/simulation-section.js';
import type { Ohms, Seconds } from '../quantity/quantity.js';
import { type CircuitState, freshCircuit } from './circuit-state.js';
import { earthResistanceOf } from './earth-bonds.js';
import { type Moment, momentOf } from './moment.js';
import type { SimulatedCircuit } from './resting-point.js';
import { UnknownModuleError } from './unknown-module-error.js';
import { advance, onNewLoad, outputOf, powered, unpowered } from './virtual-circuit.js';
import { type LoadHardware, type LoadState, lawOf, loadAtRest, trips } from './virtual-load.js';
import { type SourceOutput, sourceAtRest, sourceOutput, type SourceState } from './virtual-source.js';

export type { ModuleMoment, Moment } from './moment.js';

/** Told when somebody has changed something: what stood just before and what stands just after. */
export type StepListener = (before: Moment, after: Moment) => void;

/** What goes wrong with the module or its wires by itself, at a time. */
export interface WorldFault extends SimulatedFault {
  readonly what: 'module-dead' | 'reversed' | 'load-restarted' | 'source-restarted';
}

export type InputState = 'present' | 'absent' | 'dead';

/** What feeds the modules: a source of the bench, which is off at first, or whatever somebody plugs them into. */
export type FedBy = 'source' | 'hand';

/**
 * The world: the modules of one circuit, leads and a load. Its time is seconds since it was made. It is folded
 * forward from act to act; between acts it can be looked at for any moment without being changed, which is how
 * a reading that takes a while sees the output move.
 */
export class VirtualBench {
  readonly #circuit: SimulatedCircuit;
  readonly #hardware: LoadHardware;
  readonly #listeners: StepListener[] = [];
  #load: LoadState = loadAtRest;
  #law: LoadLaw;
  #state: CircuitState;
  /** Whether each module is plugged in. */
  readonly #inputs: InputState[];
  /** Undefined where there is none, and being plugged in is being fed. */
  #source: SourceState | undefined;
  #reversed = false;
  readonly #faults: WorldFault[];

  /** @throws UnknownModuleError for a fault of a module that is not there. */
  constructor(
    circuit: SimulatedCircuit,
    hardware: LoadHardware,
    faults: readonly WorldFault[] = [],
    fedBy: FedBy = 'hand',
  ) {
    this.#circuit = circuit;
    this.#inputs = circuit.modules.map(() => 'present');
    this.#hardware = hardware;
    this.#law = lawOf(loadAtRest, hardware);
    this.#faults = faults.toSorted((one, other) => one.at - other.at);
    for (const { of } of faults) if (of !== undefined) this.#placeOf(of);
    // Bonds to earth may short a module from the very beginning.
    this.#state = onNewLoad(circuit, freshCircuit(circuit.modules, 0), this.#law, this.#law);
    if (fedBy === 'source') {
      this.#source = sourceAtRest;
      this.#state = unpowered(circuit, this.#state, this.#law, this.#pluggedIn());
    }
  }

  get circuit(): Simulation['circuit'] {
    return this.#circuit.circuit;
  }

  /** In the order of the circuit. */
  get modules(): readonly SimulatedModule[] {
    return this.#circuit.modules;
  }

  /** The first module. */
  get module(): SimulatedModule {
    return this.#at(0);
  }

  get load(): LoadState {
    return this.#load;
  }

  /** As it is at a moment, whatever has befallen it until then. */
  loadAt(at: Seconds): LoadState {
    this.#carryOn(at);
    return this.#load;
  }

  /** As it is at a moment; at rest where there is none. */
  sourceAt(at: Seconds): SourceState {
    this.#carryOn(at);
    return this.#source ?? sourceAtRest;
  }

  /** What is at the output of the source at that moment. */
  sourceOutput(moment: Moment): SourceOutput {
    return sourceOutput(this.#source ?? sourceAtRest, moment);
  }

  /**
   * Whether a module is plugged in, be it fed or not: `dead` is a fault that nobody can undo.
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
    return earthResistanceOf(this.#at(this.#placeOf(name)));
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

  /** Sets the source; what is plugged into it is fed, or not, at once. */
  setSource(change: Partial<SourceState>, at: Seconds): void {
    this.#act(at, () => {
      this.#takeSource({ ...(this.#source ?? sourceAtRest), ...change });
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
      if (this.#source !== undefined && !feeds(this.#source)) return;
      const carryOn = input === 'present' ? powered : unpowered;
      this.#state = carryOn(this.#circuit, this.#state, this.#law, new Set(changing));
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
      state = advance(this.#circuit, state, this.#law, at);
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
    this.#state = advance(this.#circuit, this.#state, this.#law, at);
  }

  /** Dead stays dead. Reversed, no current is sunk and every voltage is negative. */
  #suffer({ at, what, of }: WorldFault): void {
    this.#act(at, () => {
      switch (what) {
        case 'module-dead': {
          const place = of === undefined ? 0 : this.#placeOf(of);
          this.#inputs[place] = 'dead';
          this.#state = unpowered(this.#circuit, this.#state, this.#law, new Set([place]));
          break;
        }
        case 'reversed':
          this.#reversed = true;
          this.#takeLoad(this.#load);
          break;
        case 'load-restarted':
          this.#takeLoad(loadAtRest);
          break;
        case 'source-restarted':
          this.#takeSource(sourceAtRest);
      }
    });
  }

  #takeSource(source: SourceState): void {
    const before = this.#source ?? sourceAtRest;
    this.#source = source;
    if (feeds(before) === feeds(source)) return;
    const carryOn = feeds(source) ? powered : unpowered;
    this.#state = carryOn(this.#circuit, this.#state, this.#law, this.#pluggedIn());
  }

  #pluggedIn(): ReadonlySet<number> {
    return new Set([...this.modules.keys()].filter((place) => this.#inputs[place] === 'present'));
  }

  #takeLoad(load: LoadState): void {
    const before = this.#law;
    this.#load = load;
    this.#law = this.#reversed ? { kind: 'open' } : lawOf(load, this.#hardware);
    this.#state = onNewLoad(this.#circuit, this.#state, before, this.#law);
  }

  #placeOf(name: string): number {
    const place = this.modules.findIndex((module) => module.name === name);
    if (place >= 0) return place;
    throw new UnknownModuleError({ module: name, modules: this.modules.map((module) => module.name) });
  }

  #at(place: number): SimulatedModule {
    const module = this.modules[place];
    if (module === undefined) throw new UnknownModuleError({ module: `${place + 1}`, modules: [] });
    return module;
  }

  #momentOf(state: CircuitState): Moment {
    return momentOf({
      circuit: this.#circuit,
      state,
      point: outputOf(this.#circuit, state, this.#law),
      leads: this.#hardware.leads,
      sign: this.#reversed ? -1 : 1,
    });
  }
}

function feeds({ output, setVoltage }: SourceState): boolean {
  return output === 'on' && setVoltage > 0;
}
