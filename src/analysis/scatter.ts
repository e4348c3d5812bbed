import { effectiveDegreesOfFreedom, type UncertainPart } from '../statistics/effective-freedom.js';
import type { RunningMoments } from '../statistics/running-moments.js';

const none: UncertainPart = { uncertainty: 0, degreesOfFreedom: Number.POSITIVE_INFINITY };

/** Type A standard uncertainty of the mean of a point's readings; a single reading shows no scatter. */
export function scatterOf({ uncertaintyOfMean, count }: RunningMoments): UncertainPart {
  return uncertaintyOfMean === undefined
    ? none
    : { uncertainty: uncertaintyOfMean, degreesOfFreedom: count - 1 };
}

/** The same in another unit, or as part of a sum. */
export function scaled({ uncertainty, degreesOfFreedom }: UncertainPart, factor: number): UncertainPart {
  return { uncertainty: Math.abs(uncertainty * factor), degreesOfFreedom };
}

/** Independent scatters of one sum, as one line of a budget. */
export function together(parts: readonly UncertainPart[]): UncertainPart {
  if (parts.length === 0) return none;
  return {
    uncertainty: Math.hypot(...parts.map(({ uncertainty }) => uncertainty)),
    degreesOfFreedom: effectiveDegreesOfFreedom(parts),
  };
}

/** Of the mean of several points' means. */
export function scatterOfMean(all: readonly RunningMoments[]): UncertainPart {
  return together(all.map((moments) => scaled(scatterOf(moments), 1 / all.length)));
}
