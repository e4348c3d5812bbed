import type { Amperes } from '../quantity/quantity.js';
import { fitLine, type LineFit } from '../statistics/line-fit.js';

const fewestPoints = 4;

/**
 * The straight line of some quantity over the current; undefined where the points are too few, or all at
 * one current (a ramp from 4 A to 4 A, a load that answers the same whatever flows).
 */
export function lineOverCurrent(
  currents: readonly Amperes[],
  values: readonly number[],
): LineFit | undefined {
  if (currents.length < fewestPoints) return undefined;
  return currents.every((current) => current === currents[0]) ? undefined : fitLine(currents, values);
}
