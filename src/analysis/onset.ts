import { fitBrokenLine } from '../statistics/broken-line-fit.js';
import type { CurvePoint } from './curve.js';
import type { Evidence } from './evidence.js';
import { type Finding, measured } from './finding.js';
import { promised, promisedErrors } from './promised-errors.js';

/**
 * The F test's p is only approximate, because the break was searched for; so it must be far beyond doubt.
 */
const strictLevel = 1e-4;
/** A knee is where the voltage falls faster from then on, and much faster: not a slight curve of the droop. */
const steeper = 3;
const fewestBeyond = 3;

/**
 * `limit-onset-current`: where the curve leaves the straight line of regulation, by a continuous two-piece
 * line. Reported only where that explains the points far better than one line does. A module that drops
 * out at once has no points beyond its knee, and then the dropout is all there is to say.
 * @param points held and steady ones, by rising current.
 */
export function onsetFindings(evidence: Evidence, points: readonly CurvePoint[]): readonly Finding[] {
  if (points.length < 2 * fewestBeyond) return [];
  const fit = fitBrokenLine(
    points.map((point) => point.current),
    points.map((point) => point.voltage),
  );
  if (fit === undefined || fit.improvementOverLine.p > strictLevel) return [];
  if (!(fit.right.slope < 0 && Math.abs(fit.right.slope) > steeper * Math.abs(fit.left.slope))) return [];
  const beyond = points.filter((point) => point.current > fit.breakpoint);
  if (beyond.length < fewestBeyond) return [];
  const current = promisedErrors(evidence.header, 'load', 'current');
  return [
    measured(
      'limit-onset-current',
      'current',
      fit.breakpoint,
      [
        {
          name: 'break of the two-piece line',
          kind: 'A',
          uncertainty: fit.breakpointUncertainty,
          degreesOfFreedom: fit.degreesOfFreedom,
        },
        promised(`${current.of}, gain`, current.gain * fit.breakpoint),
        promised(`${current.of}, offset`, current.offset),
      ],
      { step: beyond[0]?.step ?? null, note: `${beyond.length} points beyond it` },
    ),
  ];
}
