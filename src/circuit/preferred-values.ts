import { UnfitDataError } from '../statistics/unfit-data-error.js';

/**
 * The preferred values of one decade, in tenths (IEC 60063): E24 is the whole list, E12 every second of it,
 * E6 every second of that. They are the standard's and not all the rounded powers 10^(i/24): 27, 30, 33,
 * 36, 39, 43, 47 and 82 are historical.
 */
const decade = [
  10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30, 33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91,
] as const;

const strides = { E6: 4, E12: 2, E24: 1 } as const;

/** A series of preferred values by its name in IEC 60063. */
export type PreferredSeries = keyof typeof strides;
export const preferredSeries = Object.keys(strides) as readonly PreferredSeries[];

/** A value that misses a preferred one by no more than arithmetic loses counts as that one. */
const arithmetic = 1e-9;

/**
 * The smallest preferred value that is not below `value`; any unit, any decade.
 * @throws UnfitDataError unless the value is finite and above 0.
 * @example nextPreferred(0.048, 'E12'); // => 0.056
 */
export function nextPreferred(value: number, series: PreferredSeries): number {
  if (!(value > 0 && Number.isFinite(value))) {
    throw new UnfitDataError('nextPreferred', `the value is ${value}`);
  }
  const least = value * (1 - arithmetic);
  const power = Math.floor(Math.log10(least)) - 1;
  const within = valuesOf(series).map((tenths) => inDecade(tenths, power));
  return within.find((each) => each >= least) ?? inDecade(decade[0], power + 1);
}

/**
 * The preferred values from the first that is not below `from` on, rising, up to `to`.
 * @throws UnfitDataError unless `from` is finite and above 0.
 */
export function* preferredFrom(from: number, to: number, series: PreferredSeries): Generator<number> {
  let value = nextPreferred(from, series);
  while (value <= to) {
    yield value;
    value = nextPreferred(value * (1 + 2 * arithmetic), series);
  }
}

function valuesOf(series: PreferredSeries): readonly number[] {
  return decade.filter((_, index) => index % strides[series] === 0);
}

/** Through its decimal text, so that 47 mΩ is the number that `0.047` reads as. */
function inDecade(tenths: number, power: number): number {
  return Number(`${tenths}e${power}`);
}
