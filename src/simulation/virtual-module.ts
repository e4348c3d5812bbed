import type { SimulatedModule } from '../files/simulation-section.js';
import type { Kelvins, Seconds, Volts } from '../quantity/quantity.js';
import { leastHeldVoltage } from './module-curve-of.js';
import { SHUTDOWN_PERIOD } from './retry.js';

/** A module at one moment. Plain and never changed: time and acts make a new one of it. */
export interface ModuleState {
  /** Above ambient. */
  readonly rise: Kelvins;
  readonly phase: ModulePhase;
}

export type ModulePhase =
  /** No input. */
  | { readonly kind: 'off' }
  /** Delivering, coming up from `from` since `since`. */
  | { readonly kind: 'held'; readonly since: Seconds; readonly from: Volts }
  /**
   * Past its limit and resting there; a folding-back module may stay here after the load has eased. Also a
   * module of any style that has just been given its input, until it is clear whether it starts.
   */
  | { readonly kind: 'limiting' }
  /** Shut down, trying to start once each period. */
  | { readonly kind: 'retrying'; readonly since: Seconds }
  /** Shut down until its input is cycled. */
  | { readonly kind: 'latched' };

/** Cold, and long up. */
export function freshModule(at: Seconds): ModuleState {
  return { rise: 0, phase: { kind: 'held', since: at - 1, from: 0 } };
}

/** What becomes of a module that is pushed past its limit. */
export function overloaded({ limit }: SimulatedModule, at: Seconds): ModulePhase {
  switch (limit.style) {
    case 'constant-current':
    case 'foldback':
      return { kind: 'limiting' };
    case 'constant-power':
    case 'hiccup':
      return { kind: 'retrying', since: at };
    case 'latch-off':
      return { kind: 'latched' };
  }
}

/** Whether a module with this voltage at its output is delivering, and not at its limit. */
export function delivers(module: SimulatedModule, rise: Kelvins, voltage: Volts): boolean {
  return voltage >= leastHeldVoltage(module, rise) * (1 - 1e-12);
}

/** How often it tries to start again. */
export function periodOf({ limit }: SimulatedModule): Seconds {
  return limit.style === 'hiccup' ? limit.period : SHUTDOWN_PERIOD;
}
