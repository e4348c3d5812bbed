import type { Amperes, Ratio } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { coverageFactor } from '../statistics/student-t.js';
import { type CombinedStandard, expandedFor } from '../statistics/uncertainty-budget.js';
import { type Cap } from './derating.js';
import { amps, ratedAmperes } from './in-words.js';
import { type GroupLook, ownUncertainty } from './module-currents.js';

/** What a group's recommendation must mind: no module carries more than its own label says, however they share. */
export type OwnLabels = (current: Amperes) => Cap | undefined;

/**
 * The sum of the labels is no licence for the one that carries most: brings a group's current down to where
 * every module's, the upper end of its interval, is within its own label. Straight between the points that
 * the group held, and in proportion beyond the last of them.
 * @param held with every module's current known, by rising load.
 */
export function withinOwnLabels(header: RunHeader, held: readonly GroupLook[]): OwnLabels {
  const worked = header.modules.flatMap((module, index) => {
    const most = firstAtLabel(header, held, index);
    return most === undefined ? [] : [{ module, most }];
  });
  return (current) => {
    const [first] = [...worked].sort((one, other) => one.most - other.most);
    if (first === undefined || current <= first.most) return undefined;
    const { module, most } = first;
    return {
      name: 'own label',
      reason: `beyond ${amps(most)} ${module.name} alone may carry more than its own ${ratedAmperes(module.rated.current)}`,
      current: most,
      sets: `the label of ${module.name} sets it, which carries most`,
    };
  };
}

/** Where nobody knows how they share, one may carry it all. */
export function smallestLabel({ modules }: RunHeader): OwnLabels {
  const smallest = Math.min(...modules.map(({ rated }) => rated.current));
  return (current) =>
    current <= smallest
      ? undefined
      : {
          name: 'own label',
          reason: `how they share is not known, so one may carry it all: the smallest label's ${ratedAmperes(smallest)}`,
          current: smallest,
          sets: 'the smallest label sets it, as how they share is not known',
        };
}

/** One module at a point that the group held. */
class LoadedModule {
  readonly #current: Amperes;
  readonly #total: Amperes;
  readonly #rated: Amperes;
  readonly #reckon: () => CombinedStandard;

  constructor(header: RunHeader, look: GroupLook, index: number) {
    this.#current = look.currents[index]?.current ?? 0;
    this.#total = look.total;
    this.#rated = header.modules[index]?.rated.current ?? Number.NaN;
    this.#reckon = () => ownUncertainty(header, look, index);
  }

  get total(): Amperes {
    return this.#total;
  }

  /**
   * The upper end of its interval, 95 %, over its label. No current flows back into a module, so none carries more
   * than the whole, however little is known of it.
   */
  get worked(): Ratio {
    return this.#upTo(expandedFor(this.#reckon(), 0.95)) / this.#rated;
  }

  /** Told by a coverage factor that is too large, if anything: Student's t is most of the work, and mostly clear. */
  get isSurelyWithinLabel(): boolean {
    if (this.#total <= this.#rated) return true;
    const { standardUncertainty, degreesOfFreedom } = this.#reckon();
    return this.#upTo(factorAtMost(degreesOfFreedom) * standardUncertainty) <= this.#rated;
  }

  #upTo(expanded: Amperes): Amperes {
    return Math.min(this.#total, this.#current + expanded);
  }
}

const mostFreedom = 100;
const factors = new Map<number, number>();

/** The coverage factor falls with the degrees of freedom: that of the next lower whole number is no smaller. */
function factorAtMost(degreesOfFreedom: number): number {
  const whole = Math.min(mostFreedom, Math.floor(degreesOfFreedom));
  if (whole < 1) return Number.POSITIVE_INFINITY;
  const known = factors.get(whole) ?? coverageFactor(whole);
  factors.set(whole, known);
  return known;
}

/** The group's current at which a module first reaches its label, in proportion beyond the last point. */
function firstAtLabel(header: RunHeader, held: readonly GroupLook[], index: number): Amperes | undefined {
  const loadedAt = (look: GroupLook): LoadedModule => new LoadedModule(header, look, index);
  const over = held.findIndex((look) => {
    const loaded = loadedAt(look);
    return !loaded.isSurelyWithinLabel && loaded.worked > 1;
  });
  const last = over === -1 ? held.at(-1) : held[over - 1];
  const before = last === undefined ? { total: 0, worked: 0 } : loadedAt(last);
  const first = held[over];
  if (first !== undefined) {
    const point = loadedAt(first);
    const share = (1 - before.worked) / (point.worked - before.worked);
    return before.total + share * (point.total - before.total);
  }
  return before.worked > 0 ? before.total / before.worked : undefined;
}
