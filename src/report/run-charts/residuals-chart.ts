import { curveSeen } from '../../analysis/curve-seen.js';
import { type Residual, type ResidualsSeen, residualsSeen } from '../../analysis/residuals-seen.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import type { Volts } from '../../quantity/quantity.js';
import type { ChartLine } from '../chart/drawn-line.js';
import { pointChart, type PointSort } from '../chart/point-chart.js';
import { thinned } from '../chart/thinned.js';
import type { Markup } from '../page/markup.js';
import type { Result } from '../result.js';
import { figure } from '../page/figure.js';
import { amps } from './in-words.js';

const title = 'What the points lie off the line';

/** The residuals of the line of regulation over the current; undefined where there is no line. */
export function residualsFigure({ evidence, header }: Result): Markup | undefined {
  const seen = curveSeen(evidence);
  const residuals = residualsSeen(header, seen);
  if (residuals === undefined) return undefined;
  const paired = seen.line?.ways.paired === true;
  return figure(
    title,
    pointChart({
      id: 'residuals',
      title,
      description: inWords(residuals),
      x: {
        label: 'Current',
        dimension: 'current',
        from: 0,
        to: 1.03 * (seen.regulated.at(-1)?.current ?? 1),
      },
      y: { label: 'Off the line', dimension: 'voltage' },
      sorts: sortsOf(residuals),
      lines: [zeroLine(residuals.residuals)],
    }),
    caption(residuals, paired),
  );
}

function sortsOf({ residuals }: ResidualsSeen): readonly PointSort[] {
  const points = (wanted: (residual: Residual) => boolean): PointSort['points'] =>
    residuals.filter(wanted).map(({ point, off, expected }) => ({
      x: point.current,
      y: off,
      says: () =>
        `${millivolts(off)} off the line at ${amps(point.current)}, step ${point.step}; ` +
        (expected > 0 ? `95 % within ±${millivolts(expected)}` : 'its scatter is not known'),
    }));
  const isBack = ({ point }: Residual): boolean => point.phase === 'down';
  return [
    { name: 'on the way up', shape: 'circle', look: 0, points: points((each) => !isBack(each)) },
    { name: 'on the way back', shape: 'triangle-down', look: 1, points: points(isBack) },
  ];
}

/** The fitted line, at zero, with what each point's own readings promise about it. */
function zeroLine(residuals: readonly Residual[]): ChartLine {
  const edge = thinned(
    residuals.map(({ point, expected }) => ({ x: point.current, y: expected })),
    stretches,
  );
  const line = { name: 'the fitted line', xs: edge.map(({ x }) => x), ys: edge.map(() => 0), look: 0 };
  return isKnown(residuals)
    ? { ...line, band: { low: edge.map(({ y }) => -y), high: edge.map(({ y }) => y) } }
    : line;
}

/** Whether anything tells how far off a point may lie by chance. */
function isKnown(residuals: readonly Residual[]): boolean {
  return residuals.some(({ expected }) => expected > 0);
}

const stretches = 100;

function inWords({ residuals }: ResidualsSeen): string {
  const furthest = residuals.reduce<Residual | undefined>(
    (most, each) => (most === undefined || Math.abs(each.off) > Math.abs(most.off) ? each : most),
    undefined,
  );
  if (furthest === undefined) return 'No points.';
  const within = residuals.filter(({ off, expected }) => Math.abs(off) <= expected).length;
  const expected = isKnown(residuals)
    ? ` ${within} lie within what their own readings promise with 95 %, about ±${millivolts(furthest.expected)}.`
    : '';
  return (
    `${residuals.length} points. The furthest lies ${millivolts(furthest.off)} off the line, ` +
    `at ${amps(furthest.point.current)}.${expected}`
  );
}

function caption({ degreesOfFreedom, residuals }: ResidualsSeen, paired: boolean): string {
  const ways = paired
    ? ' The line goes through the mean of both ways at each current: where they differ, the module warms or something drifts.'
    : '';
  if (!isKnown(residuals)) {
    return `Each point has one reading, so nothing tells how far off one may lie by chance.${ways}`;
  }
  const by =
    degreesOfFreedom === undefined
      ? 'by the last digit alone, as each has one reading'
      : `by the scatter of its readings, pooled over all points (Student's t, ${degreesOfFreedom} degrees of freedom), and the last digit`;
  return (
    `Of 20 points about 19 lie in the shaded band where the line is straight and only readings scatter: 95 % for one ` +
    `point, ${by}. What lies outside in a row is a bent line or a drift.${ways}`
  );
}

function millivolts(value: Volts): string {
  return formatQuantity(value, 'voltage', { significant: 2 });
}
