import type { LoadLaw } from '../circuit/load-law.js';
import type { SimulatedModule } from '../files/simulation-section.js';
import type { Amperes, Celsius, Kelvins, Seconds, Volts } from '../quantity/quantity.js';
import { rippleOf } from './ripple.js';
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
  readonly moduleVoltage: Volts;
  readonly loadVoltage: Volts;
  readonly current: Amperes;
  readonly rise: Kelvins;
  readonly temperature: Celsius;
  readonly phase: ModulePhase['kind'];
  /** What the oscillation near the limit adds to both voltages. */
  readonly ripple: Volts;
}

/** Told when somebody has changed something: what stood just before and what stands just after. */
export type StepListener = (before: Moment, after: Moment) => void;

/** What goes wrong with the module or its wires by itself, at a time. */
export interface WorldFault {
  readonly at: Seconds;
  readonly what: 'module-dead' | 'reversed';
}

/** The temperature around a module for which none is given. */
const USUAL_AMBIENT: Celsius = 23;

/**
 * The world: one module, leads and a load. Its time is seconds since it was made. It is folded forward from
 * act to act; between acts it can be looked at for any moment without being changed, which is how a
 * reading that takes a while sees the output move.
 */
export class VirtualBench {
  readonly module: SimulatedModule;
  readonly #hardware: LoadHardware;
  readonly #listeners: StepListener[] = [];
  #load: LoadState = loadAtRest;
  #law: LoadLaw;
  #state: ModuleState;
  #input: 'present' | 'absent' | 'dead' = 'present';
  #reversed = false;
  readonly #faults: WorldFault[];

  constructor(module: SimulatedModule, hardware: LoadHardware, faults: readonly WorldFault[] = []) {
    this.module = module;
    this.#hardware = hardware;
    this.#law = lawOf(loadAtRest, hardware);
    this.#faults = faults.toSorted((one, other) => one.at - other.at);
    this.#state = freshModule(0);
  }

  get load(): LoadState {
    return this.#load;
  }

  /** The module's input: `dead` is a fault that nobody can undo. */
  get input(): 'present' | 'absent' | 'dead' {
    return this.#input;
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

  /** Plugs the module in or out. */
  setInput(input: 'present' | 'absent', at: Seconds): void {
    if (this.#input === 'dead') return;
    this.#act(at, () => {
      this.#input = input;
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
          this.#input = 'dead';
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

  #momentOf(state: ModuleState): Moment {
    const { voltage, current } = outputOf(this.module, state, this.#law);
    const sign = this.#reversed ? -1 : 1;
    return {
      at: state.at,
      moduleVoltage: sign * voltage,
      loadVoltage: sign * (voltage - current * this.#hardware.leads),
      current,
      rise: state.rise,
      temperature: (this.module.thermal?.ambient ?? USUAL_AMBIENT) + state.rise,
      phase: state.phase.kind,
      ripple: state.phase.kind === 'held' ? sign * rippleOf(this.module, state.rise, current, state.at) : 0,
    };
  }
}
