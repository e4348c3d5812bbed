import type { Volts } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import { predictLine } from '../statistics/line-fit.js';
import { coverageFactor } from '../statistics/student-t.js';
import type { CurvePoint } from './curve.js';
import type { CurveSeen } from './curve-seen.js';
import { moduleVoltageErrors } from './promised-errors.js';

/** What the points lie off the line that was laid through them. */
export interface ResidualsSeen {
  readonly residuals: readonly Residual[];
  /** Student's t was taken at these; undefined where no point has more than one reading. */
  readonly degreesOfFreedom: number | undefined;
}

export interface Residual {
  readonly point: CurvePoint;
  /** Its voltage less that of the line. */
  readonly off: Volts;
  /** Within ± this it lies with 95 % where the line is right and only its own readings scatter. */
  readonly expected: Volts;
}

/**
 * The residuals of the line of regulation, each with what the scatter of its readings explains: the deviation of
 * single readings, pooled over all points (JCGM 100:2008, 4.2.4), as that of a mean of so
 * many, and what the last digit hides, which is the same for all readings of a steady point. What lies further off
 * is a bent line, a drift, or a disturbance. Undefined without a line.
 */
export function residualsSeen(
  header: RunHeader,
  { regulated, line }: Pick<CurveSeen, 'regulated' | 'line'>,
): ResidualsSeen | undefined {
  if (line === undefined) return undefined;
  const { resolution } = moduleVoltageErrors(header).instrument;
  const degreesOfFreedom = regulated.reduce((sum, { readings }) => sum + Math.max(0, readings - 1), 0);
  const squares = regulated.reduce(
    (sum, { deviation = 0, readings }) => sum + (readings - 1) * deviation ** 2,
    0,
  );
  const variance = degreesOfFreedom === 0 ? 0 : squares / degreesOfFreedom;
  const factor = coverageFactor(degreesOfFreedom === 0 ? Number.POSITIVE_INFINITY : degreesOfFreedom);
  return {
    residuals: regulated.map((point) => ({
      point,
      off: point.voltage - predictLine(line.fit, point.current).value,
      expected: factor * Math.sqrt(variance / point.readings + resolution ** 2),
    })),
    degreesOfFreedom: degreesOfFreedom === 0 ? undefined : degreesOfFreedom,
  };
}
