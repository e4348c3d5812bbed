import type { Slanted } from '../statistics/root-search.js';

/**
 * What one part of a circuit gives, piece by piece, over a quantity that all its parts share: a branch's
 * current over the voltage of the bus, a link's voltage over the current of the string. A stretch reaches
 * from its place to the next one's; where the two do not meet there is a jump.
 */
export type Stretch = Straight | Bent;

export interface Straight {
  readonly kind: 'straight';
  readonly from: number;
  /** The value at `from`; endless (negative for a part) where anything beyond is out of the question. */
  readonly start: number;
  readonly slope: number;
}

/** A stretch that falls ever more gently (convex), as a hyperbola does and a diode's line. */
export interface Bent {
  readonly kind: 'bent';
  readonly from: number;
  readonly at: (place: number) => Slanted;
}

/** Stretches in ascending order. */
export type Line = readonly [Stretch, ...Stretch[]];

/** What the load demands, in the same terms; it never falls. */
export type DemandLine = readonly [Straight, ...Straight[]];

/** Value and slope of a stretch at a place within it. */
export function onStretch(stretch: Stretch, place: number): Slanted {
  if (stretch.kind === 'bent') return stretch.at(place);
  // An endless start or a place at infinity must not turn a level stretch into no number.
  const { from, start, slope } = stretch;
  return { value: slope === 0 || place === from ? start : start + slope * (place - from), slope };
}
