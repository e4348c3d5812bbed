import type { Band, Estimate } from '../../arrangement/build.js';
import type { Dimension } from '../../quantity/quantity.js';
import { toJsonUnit, ucumCode } from '../../quantity/ucum.js';
import type { BandWritten, EstimateWritten, Value, Values } from '../schema/number-schemas.js';

/*
 * How numbers stand in the JSON of what may be built: always with their unit beside them, by its UCUM code, a
 * ratio in %. JSON knows no infinity and no number that is none: null says that there is no telling.
 */

/** `{ value, unit }`. */
export function valueAsJson(value: number, dimension: Dimension): Value {
  return { value: finite(value, dimension), unit: ucumCode(dimension) };
}

/** `{ value, unit, bound, interval, coverage }`; the interval is null where it has no end. */
export function estimateAsJson({ value, low, high, bound }: Estimate, dimension: Dimension): EstimateWritten {
  return {
    ...valueAsJson(value, dimension),
    bound: bound ?? null,
    ...intervalAsJson([low, high], dimension),
  };
}

/** `{ interval, coverage }`, for a value beside it. */
export function intervalAsJson(
  [low, high]: readonly [low: number, high: number],
  dimension: Dimension,
): Pick<EstimateWritten, 'interval' | 'coverage'> {
  const has = Number.isFinite(low) && Number.isFinite(high);
  return {
    interval: has ? [toJsonUnit(low, dimension), toJsonUnit(high, dimension)] : null,
    coverage: has ? 0.95 : null,
  };
}

/** `{ values, unit }`: one axis of a curve. */
export function valuesAsJson(values: readonly number[], dimension: Dimension): Values {
  return { values: values.map((value) => finite(value, dimension)), unit: ucumCode(dimension) };
}

/** `{ best, low, high, unit, coverage }`: a list each, in the order of the curve's axis. */
export function bandAsJson({ best, low, high }: Band, dimension: Dimension): BandWritten {
  const each = (values: readonly number[]): (number | null)[] =>
    values.map((value) => finite(value, dimension));
  return { best: each(best), low: each(low), high: each(high), unit: ucumCode(dimension), coverage: 0.95 };
}

export function finite(value: number, dimension: Dimension): number | null {
  return Number.isFinite(value) ? toJsonUnit(value, dimension) : null;
}
