import type { Bench, BenchDrivers } from '../files/bench.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Celsius, Dimension, Ratio, Volts, Watts } from '../quantity/quantity.js';

/** What may never be exceeded in a run, and who says so. */
export interface Ceilings {
  /** In volts. */
  readonly voltage: Ceiling;
  /** In amperes. */
  readonly current: Ceiling;
  /** In watts. */
  readonly power: Ceiling;
  /** In degrees Celsius; undefined where nobody limits it. */
  readonly temperature?: Ceiling | undefined;
}

export interface Ceiling {
  readonly value: number;
  /** In words, for messages: `the bench`, `the load's rating`, `the source`, `the procedure`, `the nameplate`. */
  readonly setBy: string;
}

/** What a run asks for besides what the bench allows. */
export interface RunLimits {
  /** What the label of the module says, of several what theirs come to together. */
  readonly ratedVoltage?: Volts;
  /** The procedure's own. */
  readonly procedure?: {
    readonly voltage?: Volts;
    readonly current?: Amperes;
    readonly power?: Watts;
    readonly temperature?: Celsius;
  };
}

/**
 * What flows may be a tenth above the ceiling: the set-point is kept below it, so more than that is no
 * longer the load's own error but a fault.
 */
export const overCurrentFactor = 1.1;

/**
 * Part of its rated voltage by which a module may be off its label: with more it is another module, or one
 * that no longer regulates.
 */
export const offNameplate: Ratio = 0.25;

/**
 * Part of its rated current that a load is asked for at most. It protects itself at its rating, and its own
 * error must not carry it there: the protection trips 5 % above the highest set-point, or further.
 */
const ofRatedCurrent = 0.95;

/**
 * The strictest of the bench's limits, the ratings of the instruments that carry the quantity (the load's
 * rated current counts less 5 %), the procedure's limits, and for the voltage the nameplate and a quarter
 * more; for the power also what the source gives, as no module gives what it does not get. Of two that say the
 * same the bench is named, then the instrument.
 */
export function ceilingsOf(
  bench: Bench,
  drivers: BenchDrivers,
  { ratedVoltage, procedure = {} }: RunLimits = {},
): Ceilings {
  const { load, meter, scanner } = drivers;
  const { limits } = bench;
  return {
    voltage: strictest(
      { value: limits.voltage, setBy: 'the bench' },
      by("the load's rating", load.ratings.voltage),
      by("the meter's rating", meter?.ratings.voltage),
      by("the scanner's rating", scanner?.ratings.voltage),
      by('the procedure', procedure.voltage),
      by('the nameplate', ratedVoltage === undefined ? undefined : ratedVoltage * (1 + offNameplate)),
    ),
    current: strictest(
      { value: limits.current, setBy: 'the bench' },
      lessRoom(load.ratings.current),
      by('the procedure', procedure.current),
    ),
    power: strictest(
      { value: limits.power, setBy: 'the bench' },
      by("the load's rating", load.ratings.power),
      by('the source', given(bench)),
      by('the procedure', procedure.power),
    ),
    temperature: coolest(by('the bench', limits.temperature), by('the procedure', procedure.temperature)),
  };
}

/** For messages: as it was set, without the digits that reckoning makes. */
export function ceilingText({ value }: Ceiling, dimension: Dimension): string {
  return formatQuantity(Number(value.toPrecision(6)), dimension);
}

function by(setBy: string, value: number | undefined): Ceiling | undefined {
  return value === undefined ? undefined : { value, setBy };
}

function given({ instruments: { source } }: Bench): Watts | undefined {
  return source && source.voltage * source.current;
}

/** To the milliampere, as nobody reads more in a message. */
function lessRoom(amps: number | undefined): Ceiling | undefined {
  if (amps === undefined) return undefined;
  return { value: Math.round(amps * ofRatedCurrent * 1000) / 1000, setBy: "the load's rating less 5 %" };
}

function coolest(bench: Ceiling | undefined, procedure: Ceiling | undefined): Ceiling | undefined {
  return bench === undefined ? procedure : strictest(bench, procedure);
}

function strictest(first: Ceiling, ...others: readonly (Ceiling | undefined)[]): Ceiling {
  return others.reduce<Ceiling>(
    (least, other) => (other !== undefined && other.value < least.value ? other : least),
    first,
  );
}
