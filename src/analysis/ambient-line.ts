import type { Celsius, Ratio } from '../quantity/quantity.js';

/** A derating over ambient temperature as data sheets draw it. */
export interface AmbientLine {
  /** Full load up to here. */
  readonly fullTo: Celsius;
  /** What is left of the load at `at`. */
  readonly fallingTo: Ratio;
  /** Above `fullTo`. */
  readonly at: Celsius;
}

/**
 * The part of the full load that is allowed in air of this temperature: all of it up to `fullTo`, then
 * 1 − (1 − fallingTo)·(T − fullTo)/(at − fullTo), and nothing beyond `at`, where the line says nothing.
 * Where another curve derates as well, by the input voltage say, the two factors multiply.
 *
 * Source: the usual shape of data sheets; worked points and the product of two curves are checked in
 * test/reference/derating.test.ts.
 * @example allowedInAir(55, { fullTo: 40, fallingTo: 0.5, at: 60 }); // => 0.625
 */
export function allowedInAir(temperature: Celsius, { fullTo, fallingTo, at }: AmbientLine): Ratio {
  if (temperature <= fullTo) return 1;
  if (temperature > at) return 0;
  return 1 - ((1 - fallingTo) * (temperature - fullTo)) / (at - fullTo);
}
