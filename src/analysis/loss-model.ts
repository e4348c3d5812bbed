import type { Amperes, Kelvins, Ratio } from '../quantity/quantity.js';

/**
 * What a soak at one current says of another. The losses are a share that no load changes and a rest that
 * goes with the square of the current, and the settled rise is in proportion to the losses:
 *
 *     rise(I) = rise(I₀) · (fixed + (1 − fixed)·(I/I₀)²)
 *
 * Real modules also lose something in proportion to the current (rectifiers), which lies between the two.
 * So **upwards**, beyond the soaked current, a fixed share of 0 is the cautious side: no mixture warms
 * more. **Downwards** it is the other way round: 0 promises the most cooling, and a larger share is the
 * cautious side. A fixed share of 1 has no current in it at all.
 *
 * Source: first terms of the usual loss balance of a converter (standing losses, and I²·R in everything
 * the current flows through); in free air the rise grows a little more slowly than the losses (from memory:
 * with about their power 0.8), which again is cautious upwards only.
 */
export interface LossModel {
  /** Of the losses at the soaked current, from 0 to 1. */
  readonly fixed: Ratio;
}

/** The settled rise at another current than the soaked one. */
export interface RiseSeen {
  /** Above 0. */
  readonly current: Amperes;
  readonly rise: Kelvins;
}

/** @example riseAt(2, { current: 4, rise: 40 }, { fixed: 0 }); // => 10 */
export function riseAt(current: Amperes, seen: RiseSeen, { fixed }: LossModel): Kelvins {
  return seen.rise * (fixed + (1 - fixed) * (current / seen.current) ** 2);
}

/**
 * The inverse: the current at which this rise is met. 0 where the fixed losses alone make more of it,
 * endless where no current makes so much.
 * @example currentAtRise(10, { current: 4, rise: 40 }, { fixed: 0 }); // => 2
 */
export function currentAtRise(rise: Kelvins, seen: RiseSeen, { fixed }: LossModel): Amperes {
  const losses = rise / seen.rise;
  if (seen.rise <= 0 || (fixed === 1 && losses >= 1)) return rise < 0 ? 0 : Number.POSITIVE_INFINITY;
  if (losses <= fixed) return 0;
  return seen.current * Math.sqrt((losses - fixed) / (1 - fixed));
}
