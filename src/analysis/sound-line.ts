import { fitLine, type LineFit, TooFewPointsError } from '../statistics/line-fit.js';

/**
 * The straight line through points, where there is one: undefined for fewer than three, and where they lie
 * so close to one place that none can be told (a ramp from 4 A to 4 A, a load that answers the same
 * whatever flows).
 */
export function soundLine(x: readonly number[], y: readonly number[]): LineFit | undefined {
  try {
    const fit = fitLine(x, y);
    return Number.isFinite(fit.slopeUncertainty) && Number.isFinite(fit.interceptUncertainty)
      ? fit
      : undefined;
  } catch (error) {
    if (error instanceof TooFewPointsError) return undefined;
    throw error;
  }
}

const fewestPoints = 4;

/** The same for a slope that is to be a finding: with two degrees of freedom at least. */
export function lineOverCurrent(currents: readonly number[], values: readonly number[]): LineFit | undefined {
  return currents.length < fewestPoints ? undefined : soundLine(currents, values);
}
