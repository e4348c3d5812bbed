import { type CurveSeen, curveSeen } from '../../analysis/curve-seen.js';
import { findingNamed } from '../../analysis/finding.js';
import { asGiven } from '../../analysis/in-words.js';
import { ratedOf } from '../../analysis/rated.js';
import { lineAt, type RegulationLine } from '../../analysis/regulation-line.js';
import { capitalised } from '../../quantity/capitalised.js';
import { formatQuantity } from '../../quantity/format-quantity.js';
import type { Amperes } from '../../quantity/quantity.js';
import { roundedDown } from '../../quantity/rounded-down.js';
import { extremesOf } from '../chart/axis.js';
import type { ChartLine } from '../chart/drawn-line.js';
import type { VerticalMark } from '../chart/marks.js';
import { type ChartPoint, type Level, pointChart, type PointSort } from '../chart/point-chart.js';
import type { Markup } from '../page/markup.js';
import { isWhole, type Result } from '../result.js';
import { figure } from '../page/figure.js';
import { droppedPoints, heldSorts, idleSort, isSoakAlone } from './curve-points.js';
import { allowedAs, amps, foundInWords, volts } from './in-words.js';

/** A line and its interval are bent: so many places of it are reckoned. */
const places = 61;
/** The rated voltage is shown where it does not squeeze the curve into a corner. */
const nearby = 0.05;

/**
 * V against I: all that was held, what was dropped, the line of regulation with its interval, and the currents that
 * the record comes to. Undefined where nothing was held and no open circuit was read, and of a soak alone, whose own
 * chart shows its voltage.
 */
export function curveFigure(result: Result): Markup | undefined {
  const { evidence, header } = result;
  if (isSoakAlone(evidence)) return undefined;
  const seen = curveSeen(evidence);
  const held = [...heldSorts(evidence), idleSort(evidence)];
  const plate = ratedOf(header);
  const { axis, sorts, isBelow } = withDropped(held, droppedPoints(evidence), plate.voltage);
  if (sorts.every(({ points }) => points.length === 0)) return undefined;
  const lines = linesOf(seen);
  const marks = [
    ...currentMarks(result, seen),
    { at: plate.current, label: `rated ${asGiven(plate.current, 'current')}` },
  ];
  const [, furthest] = extremesOf([
    ...sorts.flatMap(({ points }) => points.map(({ x }) => x)),
    ...marks.map(({ at }) => at),
  ]);
  const title =
    header.circuit === 'single' ? 'Voltage over current' : 'Voltage of the whole over its current';
  const said = inWords(result, seen, held);
  return figure(
    title,
    pointChart({
      id: 'curve',
      title,
      description: said.join(' '),
      x: { label: 'Current', dimension: 'current', from: 0, to: furthest * 1.03 },
      y: { label: 'Voltage', dimension: 'voltage' },
      sorts,
      lines,
      levels: axis,
      marks,
    }),
    caption(seen, { isBelow, isGroup: header.circuit !== 'single' }),
  );
}

/** Those that dropped so far that the rest would be a flat line beside them are drawn at the lower edge. */
function withDropped(
  held: readonly PointSort[],
  dropped: readonly ChartPoint[],
  ratedVoltage: number,
): { readonly axis: readonly Level[]; readonly sorts: readonly PointSort[]; readonly isBelow: boolean } {
  const [low, high] = extremesOf(held.flatMap(({ points }) => points.map(({ y }) => y)));
  const isNear = ratedVoltage > low - nearby * high && ratedVoltage < high + nearby * high;
  const axis = isNear ? [{ at: ratedVoltage, name: `rated ${asGiven(ratedVoltage, 'voltage')}` }] : [];
  const floor = low - Math.max(nearby * high, high - low);
  const isHigh = ({ y }: ChartPoint): boolean => !(y < floor);
  const far = dropped
    .filter((point) => !isHigh(point))
    .map((point) => ({ ...point, y: Number.NEGATIVE_INFINITY }));
  const sorts: readonly PointSort[] = [
    ...held,
    { name: 'dropped', shape: 'cross', look: 4, points: dropped.filter(isHigh) },
    { name: 'dropped, to further down', shape: 'arrow', look: 4, points: far },
  ];
  return { axis, sorts, isBelow: far.length > 0 };
}

/** The line of regulation as far as its points go, and where there is a knee, the line beyond it. */
function linesOf({ line, regulated, beyondKnee }: CurveSeen): readonly ChartLine[] {
  const last = regulated.at(-1)?.current;
  return [
    ...(line === undefined || last === undefined ? [] : [fitted(line, 0, last)]),
    ...(beyondKnee.length === 0
      ? []
      : [
          {
            name: 'beyond the knee',
            xs: beyondKnee.map(({ current }) => current),
            ys: beyondKnee.map(({ voltage }) => voltage),
            look: 1,
          },
        ]),
  ];
}

function fitted(line: RegulationLine, from: Amperes, to: Amperes): ChartLine {
  const xs = Array.from({ length: places }, (_, index) => from + ((to - from) * index) / (places - 1));
  const there = xs.map((current) => lineAt(line, current));
  return {
    name: 'fitted line',
    xs,
    ys: there.map(({ value }) => value),
    band: {
      low: there.map(({ value, expanded }) => value - expanded),
      high: there.map(({ value, expanded }) => value + expanded),
    },
    look: 0,
  };
}

function currentMarks(result: Result, { bracket }: CurveSeen): readonly VerticalMark[] {
  const { findings } = result;
  const mark = (name: string, label: (value: Amperes) => string): readonly VerticalMark[] => {
    const finding = findingNamed(findings, name);
    if (finding === undefined || typeof finding.value !== 'number') return [];
    return [{ at: finding.value, label: label(finding.value) }];
  };
  const usable = findingNamed(findings, 'usable-current');
  const onset = findingNamed(findings, 'limit-onset-current')?.interval ?? undefined;
  const knee = mark('limit-onset-current', (value) => `limit begins ${amps(value)}`).map((each) =>
    onset === undefined ? each : { ...each, between: { from: onset[0], to: onset[1], only: false } },
  );
  return [
    // Of a test that was not finished nothing that looks like a recommendation is shown.
    ...(isWhole(result)
      ? mark('recommended-current', (value) => `${allowedAs(result)} ${roundedDown(value, 'current')}`)
      : []),
    ...mark(
      'usable-current',
      (value) => `usable ${usable?.bound === 'least' ? 'at least ' : ''}${amps(value)}`,
    ),
    ...knee,
    ...mark('unsteady-above-current', (value) => `swings above ${amps(value)}`),
    ...(bracket === undefined
      ? []
      : [
          {
            at: (bracket.held + bracket.dropped) / 2,
            label: `held ${amps(bracket.held)}, dropped ${amps(bracket.dropped)}`,
            between: { from: bracket.held, to: bracket.dropped, only: true },
          },
        ]),
  ];
}

function inWords(result: Result, seen: CurveSeen, held: readonly PointSort[]): readonly string[] {
  const { findings, header } = result;
  const counted = held
    .filter(({ points }) => points.length > 0)
    .map(({ name, points, all = points.length }) => `${all} ${name}`);
  const plate = ratedOf(header);
  const found = (name: string, words: string): readonly string[] => {
    const finding = findingNamed(findings, name);
    return finding === undefined ? [] : [`${words} ${foundInWords(finding)}.`];
  };
  const { bracket } = seen;
  return [
    `Points: ${counted.join(', ') || 'none held'}.`,
    ...found('open-circuit-voltage', 'Open circuit:'),
    ...found('droop-resistance', 'The voltage falls by a droop of'),
    ...found('limit-onset-current', 'The limit begins at'),
    ...found('unsteady-above-current', 'The output swings above'),
    ...(bracket === undefined
      ? []
      : [`It held ${amps(bracket.held)} and dropped out at ${amps(bracket.dropped)}.`]),
    ...found('usable-current', 'Usable:'),
    ...(() => {
      const value = findingNamed(findings, 'recommended-current')?.value;
      return typeof value === 'number' && isWhole(result)
        ? [`${capitalised(allowedAs(result))}: ${roundedDown(value, 'current')}.`]
        : [];
    })(),
    `The label says ${asGiven(plate.voltage, 'voltage')} and ${asGiven(plate.current, 'current')}.`,
  ];
}

function caption(seen: CurveSeen, drawn: { readonly isBelow: boolean; readonly isGroup: boolean }): string {
  const said = drawn.isGroup && seen.line === undefined ? [] : [lineInWords(seen)];
  return [
    ...(drawn.isGroup ? ['Voltage and current are those of the whole.'] : []),
    ...said,
    ...(drawn.isBelow ? ['Arrows: dropped, to a voltage below what is drawn.'] : []),
  ].join(' ');
}

function lineInWords({ line, regulated, held }: CurveSeen): string {
  if (held.length === 0) return 'No load was held.';
  const last = regulated.at(-1)?.current;
  if (line === undefined || last === undefined) {
    return 'No line was laid through the points: that takes a ramp of four currents at least.';
  }
  const { fit } = line;
  const { expanded } = lineAt(line, last);
  return (
    `The line goes through ${fit.points} points: ${volts(fit.intercept)} − ` +
    `${formatQuantity(-fit.slope, 'resistance', { significant: 4 })} · I. The shaded band holds the line itself with ` +
    `95 %, by the scatter of its points about it (Student's t, ${fit.degreesOfFreedom} degrees of freedom): ` +
    `±${formatQuantity(expanded, 'voltage', { significant: 2 })} at ${amps(last)}. What the instruments may be ` +
    'wrong by comes on top.'
  );
}
