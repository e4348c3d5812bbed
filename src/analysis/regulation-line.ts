import type { Amperes, Volts } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { type LineFit, predictLine } from '../statistics/line-fit.js';
import { coverageFactor } from '../statistics/student-t.js';
import { type BothWays, bothWays } from './both-ways.js';
import type { CurvePoint } from './curve.js';
import { moduleVoltageErrors } from './promised-errors.js';
import { lineOverCurrent } from './sound-line.js';

/** The straight line of regulation, and what it goes through. */
export interface RegulationLine {
  readonly fit: LineFit;
  readonly ways: BothWays;
  /** Of the points about the line; never less than the last digit hides. */
  readonly scatter: Volts;
}

/**
 * V = V0 − R·I by least squares through the regulated points, those of a way back taken together with those of
 * the way up; undefined where there are too few, or all at one place.
 * @param points held, steady, below the onset of the limit; by rising current.
 */
export function regulationLine(header: RunHeader, points: readonly CurvePoint[]): RegulationLine | undefined {
  const { resolution } = moduleVoltageErrors(header).instrument;
  const ways = bothWays(points, resolution);
  const fit = lineOverCurrent(
    ways.places.map((place) => place.current),
    ways.places.map((place) => place.voltage),
  );
  return fit === undefined ? undefined : { fit, ways, scatter: Math.max(fit.residualDeviation, resolution) };
}

/** The line at one current, with what its points' scatter leaves open there. */
export interface LineThere {
  readonly value: Volts;
  /** Standard uncertainty of the line itself; a further single reading scatters about it besides. */
  readonly uncertainty: Volts;
  /** The same for 95 %, by Student's t at the line's degrees of freedom. */
  readonly expanded: Volts;
}

/** Source: JCGM 100:2008, H.3.4; what the instruments promise is not in it, and moves the line as a whole. */
export function lineAt(
  { fit, scatter }: Pick<RegulationLine, 'fit' | 'scatter'>,
  current: Amperes,
): LineThere {
  const { value, uncertainty } = predictLine({ ...fit, residualDeviation: scatter }, current);
  return { value, uncertainty, expanded: coverageFactor(fit.degreesOfFreedom) * uncertainty };
}
