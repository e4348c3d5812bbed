import { type BrokenLineFit, fitBrokenLine } from '../statistics/broken-line-fit.js';
import type { CurvePoint } from './curve.js';
import type { Evidence } from './evidence.js';
import { type Finding, measured } from './finding.js';
import { moduleVoltageErrors, promised, promisedErrors } from './promised-errors.js';

/**
 * The F test's p is only approximate, because the break was searched for; so it must be far beyond doubt.
 */
const strictLevel = 1e-4;
/** A knee is where the voltage falls faster from then on, and much faster: not a slight curve of the droop. */
const steeper = 3;
const fewestPoints = 6;
const fewestBeyond = 3;

/**
 * Where the curve leaves the straight line of regulation, by a continuous two-piece line; undefined where
 * that does not explain the points far better than one line does.
 * @param points held and steady ones, by rising current.
 */
export function findKnee(points: readonly CurvePoint[]): BrokenLineFit | undefined {
  if (points.length < fewestPoints) return undefined;
  const fit = fitBrokenLine(
    points.map((point) => point.current),
    points.map((point) => point.voltage),
  );
  if (fit === undefined || fit.improvementOverLine.p > strictLevel) return undefined;
  const falls = fit.right.slope < 0 && Math.abs(fit.right.slope) > steeper * Math.abs(fit.left.slope);
  return falls ? fit : undefined;
}

/**
 * `limit-onset-current`: the knee, where enough points lie beyond it to place it. A module that drops out
 * at once has no points beyond its knee, and then the dropout is all there is to say.
 * @param points those that the knee was found in.
 */
export function onsetFindings(
  evidence: Evidence,
  points: readonly CurvePoint[],
  knee: BrokenLineFit | undefined,
): readonly Finding[] {
  if (knee === undefined) return [];
  const beyond = points.filter((point) => point.current > knee.breakpoint);
  if (beyond.length < fewestBeyond) return [];
  const current = promisedErrors(evidence.header, 'load', 'current');
  return [
    measured(
      'limit-onset-current',
      'current',
      knee.breakpoint,
      [
        {
          name: 'break of the two-piece line',
          kind: 'A',
          uncertainty: breakUncertainty(knee, moduleVoltageErrors(evidence.header).instrument.resolution),
          degreesOfFreedom: knee.degreesOfFreedom,
        },
        promised(`${current.of}, gain`, current.gain * knee.breakpoint),
        promised(`${current.of}, offset`, current.offset),
        promised(`${current.of}, resolution`, current.resolution),
      ],
      { step: beyond[0]?.step ?? null, note: `${beyond.length} points beyond it` },
    ),
  ];
}

/** Residuals smaller than the last digit say nothing about what the last digit hides. */
function breakUncertainty(
  { breakpointUncertainty, residualDeviation }: BrokenLineFit,
  resolution: number,
): number {
  if (residualDeviation === 0) return 0;
  return breakpointUncertainty * Math.max(1, resolution / residualDeviation);
}
