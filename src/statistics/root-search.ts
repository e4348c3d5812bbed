import { UnfitDataError } from './unfit-data-error.js';

/** A function and its derivative at one place. */
export interface Slanted {
  readonly value: number;
  readonly slope: number;
}

/**
 * The place between `low` and `high` where `at` crosses zero: Newton's step where it stays within the
 * bracket and gets on, halving where it does not; so it ends whatever the function. It stops when a step
 * is no longer than `tolerance` or than the doubles lie apart there.
 * @throws UnfitDataError when the values at both ends have the same sign or are no numbers.
 */
export function rootBetween(
  at: (place: number) => Slanted,
  low: number,
  high: number,
  tolerance = 0,
): number {
  const lowest = at(low).value;
  const highest = at(high).value;
  if (lowest === 0) return low;
  if (highest === 0) return high;
  if (lowest < 0 === highest < 0 || Number.isNaN(lowest) || Number.isNaN(highest)) {
    throw new UnfitDataError('rootBetween', `there is no change of sign from ${low} to ${high}`);
  }
  let below = lowest < 0 ? low : high;
  let above = lowest < 0 ? high : low;
  let place = (low + high) / 2;
  let lastStep = Math.abs(high - low);
  for (;;) {
    const { value, slope } = at(place);
    if (value === 0) return place;
    if (value < 0) below = place;
    else above = place;
    const newton = place - value / slope;
    const inside = (newton - below) * (newton - above) < 0;
    const next = inside && Math.abs(newton - place) < lastStep / 2 ? newton : (below + above) / 2;
    lastStep = Math.abs(next - place);
    if (lastStep <= Math.max(tolerance, 2 * Number.EPSILON * Math.abs(next))) return next;
    place = next;
  }
}
