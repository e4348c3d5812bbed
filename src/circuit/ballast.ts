import { UnfitDataError } from '../statistics/unfit-data-error.js';
import { preferredFrom, type PreferredSeries } from './preferred-values.js';
import { type GroupModule, worstDissipation, worstSharing } from './worst-sharing.js';

/** What is asked of a ballast. */
export interface BallastWanted {
  /** At least two; voltages in V, droops in Ω, each with its expanded uncertainty. */
  readonly modules: readonly GroupModule[];
  /**
   * The full load of the whole group, in A, above 0; where it depends on the ballast, such as what the group may
   * be asked for once it shares better, that of each ballast in Ω.
   */
  readonly load: number | ((ballast: number) => number);
  /** The most that (I_max − I_min)/I_mean may be at full load; above 0 and below 1. */
  readonly imbalance: number;
  /** Of the resistor: 0.05 for ± 5 %; from 0 to below 1. */
  readonly tolerance: number;
  readonly series: PreferredSeries;
  /** The most that the ballasts may cost of the lowest open-circuit voltage; 10 % when left out. */
  readonly mostCost?: number;
  /** Whether a ballast in Ω, 0 for none, is good for all else that is asked of it; any is when left out. */
  readonly isGood?: (ballast: number) => boolean;
}

/** A ballast that does it. */
export interface Ballast {
  /** Nominal, in Ω. */
  readonly value: number;
  /** The worst case, within what was wanted. */
  readonly imbalance: number;
  /** Of the module that carries most in that case, in A. */
  readonly mostCurrent: number;
  /** Of the worst-loaded ballast at full load, in W. */
  readonly dissipation: number;
  /** Across the ballasts at full load, each carrying its equal share, in V. */
  readonly voltageCost: number;
}

export type BallastOutcome =
  | ({ readonly kind: 'found' } & Ballast)
  /** The modules share well enough joined directly. */
  | { readonly kind: 'unneeded'; readonly imbalance: number }
  /** No ballast however large does it: its tolerance alone may unbalance them by this much. */
  | { readonly kind: 'too-coarse'; readonly imbalance: number }
  /** The largest that the voltage allows still leaves this much; 0 Ω where not even the smallest fits. */
  | { readonly kind: 'too-costly'; readonly imbalance: number; readonly largest: number };

/** Smaller resistors are no parts on a shelf, and joints and wires would outweigh them. */
export const smallest = 1e-3;
/** Of the lowest open-circuit voltage. */
export const usualCost = 0.1;

/**
 * The smallest preferred value (IEC 60063) that keeps the worst case within the wanted imbalance at full
 * load: voltages and droops anywhere within their uncertainties, each resistor anywhere within its
 * tolerance, all independent of each other. An error that the meter makes for all modules alike does not
 * unbalance them, so uncertainties that hold one make the answer larger than need be, never smaller.
 *
 * The values are tried upward one by one, as a larger ballast is not always the better one: it swamps
 * mismatched voltages and droops, but brings its own tolerance.
 * @throws UnfitDataError for fewer than two modules, or numbers outside their ranges.
 */
export function smallestBallast(wanted: BallastWanted): BallastOutcome {
  requireSense(wanted);
  const { modules, tolerance, series, mostCost = usualCost, isGood = () => true } = wanted;
  const loadOf = (ballast: number): number =>
    typeof wanted.load === 'function' ? wanted.load(ballast) : wanted.load;
  const worst = (ballast: number) => worstSharing({ modules, load: loadOf(ballast), tolerance, ballast });
  const direct = worst(0);
  if (direct.imbalance <= wanted.imbalance && isGood(0))
    return { kind: 'unneeded', imbalance: direct.imbalance };
  const lowest = Math.min(...modules.map(({ openCircuit }) => openCircuit.value));
  let largest = 0;
  let left = direct.imbalance;
  for (const value of preferredFrom(smallest, Number.MAX_VALUE, series)) {
    const load = loadOf(value);
    const voltageCost = (value * load) / modules.length;
    if (voltageCost > mostCost * lowest) break;
    const { imbalance, mostCurrent } = worst(value);
    if (imbalance <= wanted.imbalance && isGood(value)) {
      const dissipation = worstDissipation({ modules, load, tolerance, ballast: value });
      return { kind: 'found', value, imbalance, mostCurrent, dissipation, voltageCost };
    }
    largest = value;
    left = imbalance;
  }
  const byTolerance = imbalanceByTolerance(tolerance, modules.length);
  return byTolerance > wanted.imbalance
    ? { kind: 'too-coarse', imbalance: byTolerance }
    : { kind: 'too-costly', imbalance: left, largest };
}

/**
 * What is left when ballasts swamp everything else: one at its lowest, the others at their highest, which
 * is 2·t·N/(N − (N − 2)·t).
 */
export function imbalanceByTolerance(tolerance: number, modules: number): number {
  return (2 * tolerance * modules) / (modules - (modules - 2) * tolerance);
}

function requireSense({ modules, load, imbalance, tolerance, mostCost = usualCost }: BallastWanted): void {
  const refuse = (problem: string): never => {
    throw new UnfitDataError('smallestBallast', problem);
  };
  if (modules.length < 2) refuse(`there are ${modules.length} modules`);
  for (const { openCircuit, droop } of modules) {
    if (!(openCircuit.value > 0 && droop.value >= 0)) refuse('a module has no voltage, or a negative droop');
    if (!(openCircuit.expanded >= 0 && droop.expanded >= 0)) refuse('an uncertainty is missing');
  }
  if (typeof load === 'number' && !(load > 0 && Number.isFinite(load))) refuse(`the load is ${load} A`);
  if (!(imbalance > 0 && imbalance < 1)) refuse(`the wanted imbalance is ${imbalance}`);
  if (!(tolerance >= 0 && tolerance < 1)) refuse(`the tolerance is ${tolerance}`);
  if (!(mostCost > 0 && mostCost < 1)) refuse(`the most that it may cost is ${mostCost}`);
}
