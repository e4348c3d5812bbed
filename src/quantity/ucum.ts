import { shifted } from './decimal-text.js';
import { dimensions, type Dimension } from './quantity.js';

/**
 * The unit of a dimension in JSON, as its code in UCUM (The Unified Code for Units of Measure, table of
 * case-sensitive codes): `Ohm`, `Cel`, `%`.
 */
export function ucumCode(dimension: Dimension): (typeof dimensions)[Dimension] {
  return dimensions[dimension];
}

/** A quantity as JSON gives it, in the unit that {@link ucumCode} names: a ratio is in %, so 0.05 is 5. */
export function toJsonUnit(value: number, dimension: Dimension): number {
  return dimension === 'ratio' ? shifted(value, 2) : value;
}

/** The inverse of {@link toJsonUnit}. */
export function fromJsonUnit(value: number, dimension: Dimension): number {
  return dimension === 'ratio' ? shifted(value, -2) : value;
}
