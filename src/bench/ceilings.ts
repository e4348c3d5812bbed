import type { Bench } from '../files/bench.js';
import type { Driver } from '../files/driver.js';

/** What may never be exceeded on this bench, and who says so. */
export interface Ceilings {
  /** In volts. */
  readonly voltage: Ceiling;
  /** In amperes. */
  readonly current: Ceiling;
  /** In watts. */
  readonly power: Ceiling;
}

export interface Ceiling {
  readonly value: number;
  /** In words, for messages: `the bench`, `the load's rating`. */
  readonly setBy: string;
}

/**
 * What flows may be a tenth above the ceiling: the set-point is kept below it, so more than that is no
 * longer the load's own error but a fault.
 */
export const overCurrentFactor = 1.1;

/** The strictest of the bench's limits and the ratings of the instruments that carry the quantity. */
export function ceilingsOf(
  bench: Bench,
  drivers: { readonly load: Driver; readonly meter?: Driver | undefined },
): Ceilings {
  const { load, meter } = drivers;
  return {
    voltage: strictest(
      { value: bench.limits.voltage, setBy: 'the bench' },
      rating(load.ratings.voltage, "the load's rating"),
      rating(meter?.ratings.voltage, "the meter's rating"),
    ),
    current: strictest(
      { value: bench.limits.current, setBy: 'the bench' },
      rating(load.ratings.current, "the load's rating"),
    ),
    power: strictest(
      { value: bench.limits.power, setBy: 'the bench' },
      rating(load.ratings.power, "the load's rating"),
    ),
  };
}

function rating(value: number | undefined, setBy: string): Ceiling | undefined {
  return value === undefined ? undefined : { value, setBy };
}

function strictest(first: Ceiling, ...others: readonly (Ceiling | undefined)[]): Ceiling {
  return others.reduce<Ceiling>(
    (least, other) => (other !== undefined && other.value < least.value ? other : least),
    first,
  );
}
