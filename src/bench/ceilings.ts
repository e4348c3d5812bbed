import type { Bench, BenchDrivers } from '../files/bench.js';

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

/**
 * Part of its rated current that a load is asked for at most. It protects itself at its rating, and its own
 * error must not carry it there: the protection trips 5 % above the highest set-point, or further.
 */
const ofRatedCurrent = 0.95;

/**
 * The strictest of the bench's limits and the ratings of the instruments that carry the quantity; the load's
 * rated current counts less 5 %.
 */
export function ceilingsOf(bench: Bench, drivers: BenchDrivers): Ceilings {
  const { load, meter, scanner } = drivers;
  return {
    voltage: strictest(
      { value: bench.limits.voltage, setBy: 'the bench' },
      rating(load.ratings.voltage, "the load's rating"),
      rating(meter?.ratings.voltage, "the meter's rating"),
      rating(scanner?.ratings.voltage, "the scanner's rating"),
    ),
    current: strictest({ value: bench.limits.current, setBy: 'the bench' }, lessRoom(load.ratings.current)),
    power: strictest(
      { value: bench.limits.power, setBy: 'the bench' },
      rating(load.ratings.power, "the load's rating"),
    ),
  };
}

function rating(value: number | undefined, setBy: string): Ceiling | undefined {
  return value === undefined ? undefined : { value, setBy };
}

/** To the milliampere, as nobody reads more in a message. */
function lessRoom(amps: number | undefined): Ceiling | undefined {
  if (amps === undefined) return undefined;
  return { value: Math.round(amps * ofRatedCurrent * 1000) / 1000, setBy: "the load's rating less 5 %" };
}

function strictest(first: Ceiling, ...others: readonly (Ceiling | undefined)[]): Ceiling {
  return others.reduce<Ceiling>(
    (least, other) => (other !== undefined && other.value < least.value ? other : least),
    first,
  );
}
