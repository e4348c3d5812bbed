import { type LoadLaw, currentDrawn } from '../circuit/load-law.js';
import type { Corner } from '../circuit/module-curve.js';
import { operatingPoints } from '../circuit/operating-point.js';
import type { SimulatedModule } from '../files/simulation-section.js';
import type { Kelvins, Seconds, Volts } from '../quantity/quantity.js';
import { curveOf, leastHeldVoltage, startingCurveOf } from './module-curve-of.js';
import { firstFailing } from './first-failing.js';
import { ATTEMPT_SHARE, SHUTDOWN_PERIOD, attemptBegins, attempting, nextAttempt } from './retry.js';
import { riseAfter, steadyRise } from './warming.js';

/** A module at one moment. Plain and never changed: time and acts make a new one of it. */
export interface ModuleState {
  readonly at: Seconds;
  /** Above ambient. */
  readonly rise: Kelvins;
  readonly phase: ModulePhase;
}

export type ModulePhase =
  /** No input. */
  | { readonly kind: 'off' }
  /** Delivering, coming up from `from` since `since`. */
  | { readonly kind: 'held'; readonly since: Seconds; readonly from: Volts }
  /** Past its limit and resting there; a folding-back module may stay here after the load has eased. */
  | { readonly kind: 'limiting' }
  /** Shut down, trying to start once each period. */
  | { readonly kind: 'retrying'; readonly since: Seconds }
  /** Shut down until its input is cycled. */
  | { readonly kind: 'latched' };

/** The output capacitors fill through the module's limit: within 1 % after about 18 ms. */
const RECOVERY_TIME_CONSTANT: Seconds = 0.004;

/** While current and warming act on each other, the current is held for this share of the time constant. */
const STEPS_PER_TIME_CONSTANT = 20;

/** Cold, and its input present. */
export function freshModule(at: Seconds): ModuleState {
  return { at, rise: 0, phase: { kind: 'held', since: at - 1, from: 0 } };
}

/** Takes the input away. */
export function unpowered(state: ModuleState): ModuleState {
  return { ...state, phase: { kind: 'off' } };
}

/** Gives the input back: it starts from 0 V, which clears a latch and may lock up on a load. */
export function powered(module: SimulatedModule, state: ModuleState, law: LoadLaw): ModuleState {
  if (state.phase.kind !== 'off') return state;
  const starts = mustDeliver(module, state.rise, law);
  return {
    ...state,
    phase: starts ? { kind: 'held', since: state.at, from: 0 } : overloaded(module, state.at),
  };
}

/** The load has changed: what was held may be too much now, what was too much may be held again. */
export function onNewLoad(
  module: SimulatedModule,
  state: ModuleState,
  before: LoadLaw,
  after: LoadLaw,
): ModuleState {
  return settle(module, state, after, outputOf(module, state, before).voltage, attempting);
}

/**
 * Carries a module on to a later moment on an unchanged load. Warming is first order and exact over any
 * length; the moment a warming (or cooling) limit passes the load is searched to a microsecond, so an
 * hour costs no more than a second.
 */
export function advance(
  module: SimulatedModule,
  state: ModuleState,
  law: LoadLaw,
  until: Seconds,
): ModuleState {
  let now = state;
  while (now.at < until) {
    const { voltage } = outputOf(module, now, law);
    now = settle(module, stretch(module, now, law, until), law, voltage, attemptBegins);
  }
  return now;
}

/** Voltage at the module and current, at the state's moment; the oscillation near the limit left out. */
export function outputOf(module: SimulatedModule, state: ModuleState, law: LoadLaw): Corner {
  const { phase } = state;
  switch (phase.kind) {
    case 'off':
    case 'latched':
      return { voltage: 0, current: 0 };
    case 'held': {
      const goal = heldPoint(module, state.rise, law);
      if (goal === undefined) return lowPoint(module, state.rise, law);
      const missing =
        (goal.voltage - phase.from) * Math.exp(-(state.at - phase.since) / RECOVERY_TIME_CONSTANT);
      if (missing < 1e-9) return goal;
      const voltage = goal.voltage - missing;
      return { voltage, current: Math.min(goal.current, currentDrawn(law, voltage)) };
    }
    case 'limiting':
      return lowPoint(module, state.rise, law);
    case 'retrying':
      return attempting(phase.since, periodOf(module), state.at)
        ? lowPoint(module, state.rise, law)
        : { voltage: 0, current: 0 };
  }
}

/**
 * Applies at once what follows from the present load and temperature; `from` is the voltage it had.
 * A module that retries starts whenever it tries once its load has eased, but having merely cooled by a hair
 * only with a new attempt: else it would start and trip without end within one.
 */
function settle(
  module: SimulatedModule,
  state: ModuleState,
  law: LoadLaw,
  from: Volts,
  mayStart: (since: Seconds, period: Seconds, at: Seconds) => boolean,
): ModuleState {
  const { phase, at, rise } = state;
  switch (phase.kind) {
    case 'off':
    case 'latched':
      return state;
    case 'held':
      return heldPoint(module, rise, law) === undefined ? { ...state, phase: overloaded(module, at) } : state;
    case 'limiting':
      return mustDeliver(module, rise, law) ? { ...state, phase: { kind: 'held', since: at, from } } : state;
    case 'retrying':
      return heldPoint(module, rise, law) !== undefined && mayStart(phase.since, periodOf(module), at)
        ? { ...state, phase: { kind: 'held', since: at, from } }
        : state;
  }
}

/** One stretch in which the phase does not change, at the longest to `until`. */
function stretch(module: SimulatedModule, state: ModuleState, law: LoadLaw, until: Seconds): ModuleState {
  const { phase } = state;
  const goal =
    phase.kind === 'retrying' && heldPoint(module, state.rise, law) !== undefined
      ? Math.min(until, nextAttempt(phase.since, periodOf(module), state.at))
      : until;
  const target = steadyRise(module, meanSquareCurrent(module, state, state.rise, law));
  const risen = (at: Seconds): Kelvins => riseAfter(module, state.rise, target, at - state.at);
  const could = couldDeliver(module, state, state.rise, law);
  const end = currentIsSteady(module, state, risen(goal), law)
    ? goal
    : Math.min(goal, state.at + step(module));
  const holds = (at: Seconds): boolean => couldDeliver(module, state, risen(at), law) === could;
  const turn = holds(end) ? end : firstFailing(holds, state.at, end);
  return { at: turn, rise: risen(turn), phase };
}

function step(module: SimulatedModule): Seconds {
  return (module.thermal?.timeConstant ?? Number.POSITIVE_INFINITY) / STEPS_PER_TIME_CONSTANT;
}

/** What decides the phase, as warming moves it: is there a point at which the module delivers? */
function couldDeliver(module: SimulatedModule, { phase }: ModuleState, rise: Kelvins, law: LoadLaw): boolean {
  if (phase.kind === 'off' || phase.kind === 'latched') return false;
  return phase.kind === 'limiting'
    ? mustDeliver(module, rise, law)
    : heldPoint(module, rise, law) !== undefined;
}

function currentIsSteady(
  module: SimulatedModule,
  state: ModuleState,
  laterRise: Kelvins,
  law: LoadLaw,
): boolean {
  const now = meanSquareCurrent(module, state, state.rise, law);
  const later = meanSquareCurrent(module, state, laterRise, law);
  return Math.abs(later - now) <= 1e-9 * now;
}

/** What heats: the square of the current, averaged over the periods of a module that keeps trying. */
function meanSquareCurrent(
  module: SimulatedModule,
  { phase }: ModuleState,
  rise: Kelvins,
  law: LoadLaw,
): number {
  switch (phase.kind) {
    case 'off':
    case 'latched':
      return 0;
    case 'held':
      return (heldPoint(module, rise, law) ?? lowPoint(module, rise, law)).current ** 2;
    case 'limiting':
      return lowPoint(module, rise, law).current ** 2;
    case 'retrying':
      return ATTEMPT_SHARE * lowPoint(module, rise, law).current ** 2;
  }
}

/** Where the module delivers, if it can. Asked again and again of one moment, so the last answer is kept. */
function heldPoint(module: SimulatedModule, rise: Kelvins, law: LoadLaw): Corner | undefined {
  const last = lastHeld.get(law);
  if (last?.module === module && last.rise === rise) return last.point;
  const highest = operatingPoints(curveOf(module, rise), law)[0];
  const point = highest !== undefined && isHeld(module, rise, highest) ? highest : undefined;
  lastHeld.set(law, { module, rise, point });
  return point;
}

const lastHeld = new WeakMap<
  LoadLaw,
  { readonly module: SimulatedModule; readonly rise: Kelvins; readonly point: Corner | undefined }
>();

/** Coming from below: even the lowest point at which it could rest is one at which it delivers. */
function mustDeliver(module: SimulatedModule, rise: Kelvins, law: LoadLaw): boolean {
  const lowest = operatingPoints(curveOf(module, rise), law).at(-1);
  return lowest !== undefined && isHeld(module, rise, lowest);
}

function lowPoint(module: SimulatedModule, rise: Kelvins, law: LoadLaw): Corner {
  return operatingPoints(startingCurveOf(module, rise), law).at(-1) ?? { voltage: 0, current: 0 };
}

function isHeld(module: SimulatedModule, rise: Kelvins, { voltage }: Corner): boolean {
  return voltage >= leastHeldVoltage(module, rise) * (1 - 1e-12);
}

function overloaded(module: SimulatedModule, at: Seconds): ModulePhase {
  switch (module.limit.style) {
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

function periodOf(module: SimulatedModule): Seconds {
  return module.limit.style === 'hiccup' ? module.limit.period : SHUTDOWN_PERIOD;
}
