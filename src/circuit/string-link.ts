import { type Slanted, rootBetween } from '../statistics/root-search.js';
import { type ModuleCurve } from './module-curve.js';
import { type ShockleyDiode, forwardCurrent, forwardVoltage, thermalVoltage } from './shockley-diode.js';
import type { Line, Straight, Stretch } from './stretch.js';

/** One link of a series string: a module, what lies in series with it, and what lies across its output. */
export interface Link {
  readonly source: LinkSource;
  /** In series on its positive side, ohms. */
  readonly resistance?: number;
  /** Across the output, conducting once the output goes below 0 V. */
  readonly diode?: ShockleyDiode;
}

export type LinkSource =
  | { readonly kind: 'module'; readonly curve: ModuleCurve }
  /** Gives nothing; a foreign current goes through its output resistance (ohms, `Infinity` for an open one). */
  | { readonly kind: 'off'; readonly outputResistance: number };

/** A folding-back module's corners: its knee, and what is left of its current at 0 V. */
export interface Fold {
  readonly voltage: number;
  readonly current: number;
  readonly shortCircuit: number;
}

/** The fold of a link that takes its current back while its voltage falls; undefined for all others. */
export function foldOf({ source }: Link): Fold | undefined {
  if (source.kind === 'off' || source.curve.limit.style !== 'foldback') return undefined;
  const { current, shortCircuit } = source.curve.limit;
  const voltage = kneeVoltage(source.curve);
  return voltage > 0 && shortCircuit < current ? { voltage, current, shortCircuit } : undefined;
}

/**
 * The voltage at a link's output over the current through the string, the highest it can have. Once a
 * folding-back link has fallen, it gives from its short-circuit current upward what a fallen one gives.
 */
export function linkLine(link: Link, state: 'standing' | 'fallen'): Line {
  const { source, diode } = link;
  const falls = source.kind === 'off' ? [offFall(source.outputResistance)] : fallsOf(source.curve, state);
  const [first, ...others] = falls.flatMap((fall, index) => {
    if (fall.kind === 'hyperbola') return [hyperbola(fall)];
    const to = falls[index + 1]?.voltage ?? Number.NEGATIVE_INFINITY;
    return [...aboveZero(fall, diode), ...(diode === undefined ? [] : belowZero(fall, to, diode))];
  });
  return [first ?? { kind: 'straight', from: 0, start: 0, slope: 0 }, ...others];
}

/** The line on which a link folds back, from its short-circuit current to its knee. */
export function foldingLine({ voltage, current, shortCircuit }: Fold): Line {
  const slope = voltage / (current - shortCircuit);
  return [{ kind: 'straight', from: shortCircuit, start: 0, slope }];
}

/** From this corner on the voltage falls: by `resistance` for each ampere (`Infinity`: straight down), or as P/I. */
type Fall =
  | { readonly kind: 'line'; readonly current: number; readonly voltage: number; readonly resistance: number }
  | { readonly kind: 'hyperbola'; readonly current: number; readonly voltage: number };
type LineFall = Extract<Fall, { kind: 'line' }>;

const straightDown = Number.POSITIVE_INFINITY;

function offFall(outputResistance: number): Fall {
  return { kind: 'line', current: 0, voltage: 0, resistance: outputResistance };
}

/** Unlike a module on its own, one in a string can be driven below 0 V: its lines go on there. */
function fallsOf(curve: ModuleCurve, state: 'standing' | 'fallen'): readonly Fall[] {
  const { openCircuitVoltage, droopResistance, limit } = curve;
  const regulated: Fall = {
    kind: 'line',
    current: 0,
    voltage: openCircuitVoltage,
    resistance: droopResistance,
  };
  const knee = { current: limit.current, voltage: kneeVoltage(curve) };
  const collapse: Fall = { kind: 'line', ...knee, resistance: straightDown };
  switch (limit.style) {
    case 'constant-current':
      return [regulated, { ...collapse, resistance: limit.slope ?? straightDown }];
    case 'constant-power':
      return [regulated, knee.voltage > 0 ? { kind: 'hyperbola', ...knee } : collapse];
    case 'foldback': {
      if (knee.voltage <= 0) return [regulated, collapse];
      const low: Fall = { ...collapse, current: limit.shortCircuit, voltage: 0 };
      const more = limit.shortCircuit - limit.current;
      if (more < 0) return [regulated, state === 'fallen' ? low : collapse];
      return more === 0
        ? [regulated, collapse]
        : [regulated, { ...collapse, resistance: knee.voltage / more }, low];
    }
  }
}

function kneeVoltage({ openCircuitVoltage, droopResistance, limit }: ModuleCurve): number {
  return openCircuitVoltage - droopResistance * limit.current;
}

function hyperbola({ voltage, current }: { voltage: number; current: number }): Stretch {
  const power = voltage * current;
  return { kind: 'bent', from: current, at: (at) => ({ value: power / at, slope: -power / (at * at) }) };
}

function aboveZero(
  { current, voltage, resistance }: LineFall,
  diode: ShockleyDiode | undefined,
): readonly Straight[] {
  if (diode !== undefined && (voltage < 0 || resistance === straightDown)) return [];
  return resistance === straightDown
    ? [{ kind: 'straight', from: current, start: Number.NEGATIVE_INFINITY, slope: 0 }]
    : [{ kind: 'straight', from: current, start: voltage, slope: -resistance }];
}

/** The same fall where it lies below 0 V, the diode taking its part; its reverse leakage is left out. */
function belowZero(
  { current, voltage, resistance }: LineFall,
  to: number,
  diode: ShockleyDiode,
): readonly Stretch[] {
  if (to >= 0 || resistance === 0) return [];
  const conductance = 1 / resistance;
  const atZero = current + voltage * conductance;
  const from = voltage >= 0 ? atZero : current + forwardCurrent(diode, -voltage);
  return [{ kind: 'bent', from, at: (through) => besideDiode(through - atZero, conductance, diode) }];
}

/**
 * The voltage (0 or below) at which a conductance and a diode across it take a current together: in closed
 * form where the diode takes all, else the one zero of a convex function within its bracket.
 */
function besideDiode(current: number, conductance: number, diode: ShockleyDiode): Slanted {
  const excess = (voltage: number): Slanted => ({
    value: forwardCurrent(diode, -voltage) - conductance * voltage - current,
    slope: -conductance - (diode.saturationCurrent + forwardCurrent(diode, -voltage)) / thermalVoltage(diode),
  });
  if (current <= 0) return { value: 0, slope: 1 / excess(0).slope };
  const diodeAlone = -forwardVoltage(diode, current);
  const low = conductance > 0 ? Math.max(diodeAlone, -current / conductance) : diodeAlone;
  const value = conductance > 0 && excess(low).value > 0 ? rootBetween(excess, low, 0) : low;
  return { value, slope: 1 / excess(value).slope };
}
