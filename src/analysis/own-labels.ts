import type { Amperes, Ratio } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { type Cap } from './derating.js';
import { amps, ratedAmperes } from './in-words.js';
import { expandedCurrent, type GroupLook } from './module-currents.js';

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
    const points = held.map((look) => ({
      total: look.total,
      worked: upperEnd(header, look, index) / module.rated.current,
    }));
    const most = firstAtLabel(points);
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

/** No current flows back into a module, so none carries more than the whole, however little is known of it. */
function upperEnd(header: RunHeader, look: GroupLook, index: number): Amperes {
  const { current = 0 } = look.currents[index] ?? {};
  return Math.min(look.total, current + expandedCurrent(header, look, index));
}

/** The group's current at which a module first reaches its label, in proportion beyond the last point. */
function firstAtLabel(
  points: readonly { readonly total: Amperes; readonly worked: Ratio }[],
): Amperes | undefined {
  let before = { total: 0, worked: 0 };
  for (const point of points) {
    if (point.worked > 1) {
      const share = (1 - before.worked) / (point.worked - before.worked);
      return before.total + share * (point.total - before.total);
    }
    before = point;
  }
  return before.worked > 0 ? before.total / before.worked : undefined;
}
