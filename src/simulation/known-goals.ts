import type { LoadLaw } from '../circuit/load-law.js';
import type { Ratio } from '../quantity/quantity.js';
import type { RestingPoint, SimulatedCircuit } from './resting-point.js';

/** What a module gives at a moment. */
export type Gives = 'on its curve' | 'from below' | 'nothing';

/** What a resting point depends on, once circuit and load are given. */
export interface Asked {
  readonly gives: readonly Gives[];
  /** What warming multiplies each limit by: of a temperature only that counts. */
  readonly factors: readonly Ratio[];
}

interface Known {
  readonly gives: readonly Gives[];
  /** The point is the same from the one to the other. */
  readonly from: readonly Ratio[];
  readonly to: readonly Ratio[];
  readonly point: RestingPoint;
}

/**
 * Where a circuit rests on one load, as far as that has been worked out: asked again and again of one moment and
 * of the next, it is found once. For each choice of what the modules give the last answer is kept.
 */
export class KnownGoals {
  readonly #known: Known[] = [];

  find({ gives, factors }: Asked): RestingPoint | undefined {
    const known = this.#known.find((one) => isSame(one.gives, gives));
    const isIn = known !== undefined && factors.every((factor, place) => isBetween(known, place, factor));
    return isIn ? known.point : undefined;
  }

  /** The point is found there, and at all factors up to those at the other end. */
  keep({ gives, factors }: Asked, point: RestingPoint, to: readonly Ratio[] = factors): void {
    const place = this.#known.findIndex((one) => isSame(one.gives, gives));
    this.#known[place < 0 ? this.#known.length : place] = { gives, from: factors, to, point };
  }
}

const ofLoads = new WeakMap<LoadLaw, { readonly circuit: SimulatedCircuit; readonly goals: KnownGoals }>();

/** What is known of a circuit on a load. */
export function goalsOn(law: LoadLaw, circuit: SimulatedCircuit): KnownGoals {
  const known = ofLoads.get(law);
  if (known?.circuit === circuit) return known.goals;
  const goals = new KnownGoals();
  ofLoads.set(law, { circuit, goals });
  return goals;
}

/** Two points count as one up to the rounding with which they are worked out. */
const ROUNDING = 1e-12;

export function isSamePoint(one: RestingPoint, other: RestingPoint): boolean {
  return (
    isAlike(one.voltage, other.voltage) &&
    isAlike(one.current, other.current) &&
    one.modules.every(({ voltage, current, through }, place) => {
      const module = other.modules[place];
      return (
        module !== undefined &&
        isAlike(voltage, module.voltage) &&
        isAlike(current, module.current) &&
        isAlike(through, module.through)
      );
    })
  );
}

function isAlike(one: number, other: number): boolean {
  return Math.abs(one - other) <= ROUNDING * Math.abs(one);
}

function isSame(some: readonly Gives[], others: readonly Gives[]): boolean {
  return some.every((one, place) => one === others[place]);
}

function isBetween({ from, to }: Known, place: number, factor: Ratio): boolean {
  const [one = Number.NaN, other = Number.NaN] = [from[place], to[place]];
  return factor >= Math.min(one, other) && factor <= Math.max(one, other);
}
