import type { Phase } from '../../record/journal-event.js';
import type { ViewedPoint, ViewedRun } from '../view-state.js';
import { decimalsOf, fixed } from './numbers.js';

export type MarkLook = 'held' | 'back' | 'dropped';

/** One point as it is drawn: where, how, and whether a line comes to it from the one before. */
export interface Mark {
  readonly x: number;
  readonly y: number;
  readonly look: MarkLook;
  readonly joined: boolean;
}

export interface Axis {
  readonly label: string;
  readonly from: number;
  readonly to: number;
}

/** What is drawn of the points so far. */
export interface Chart {
  readonly title: string;
  readonly x: Axis;
  readonly y: Axis;
  /** In the order in which they were taken. */
  readonly marks: readonly Mark[];
  /** The nameplate's current, where current goes across. */
  readonly rated?: number;
}

type Kind = 'curve' | 'soak' | 'trace';

const kinds: Readonly<Partial<Record<Phase, Kind>>> = {
  idle: 'curve',
  ramp: 'curve',
  down: 'curve',
  start: 'curve',
  climb: 'curve',
  halve: 'curve',
  return: 'curve',
  steadiness: 'curve',
  share: 'curve',
  stack: 'curve',
  trace: 'trace',
  soak: 'soak',
};

/** What is walked through from one end to the other, and so is a line; a search jumps. */
const walked: ReadonlySet<Phase> = new Set(['idle', 'ramp', 'down', 'share', 'stack', 'soak', 'trace']);

/**
 * The chart that the latest points ask for: voltage against current; temperature over the time of a soak, or its
 * voltage where nothing measures temperature; voltage against current at the limit, point after point. Undefined
 * where there is nothing to draw.
 */
export function chartOf(points: readonly ViewedPoint[], run: Pick<ViewedRun, 'rated'>): Chart | undefined {
  const counting = points.filter(({ outcome, phase }) => outcome !== 'interrupted' && phase in kinds);
  const last = counting.at(-1);
  if (last === undefined) return undefined;
  switch (kinds[last.phase] ?? 'curve') {
    case 'soak':
      return soakOf(counting.filter(({ phase, step }) => phase === 'soak' && step === last.step));
    case 'trace':
      return curveOf(
        counting.filter(({ phase, step }) => phase === 'trace' && step === last.step),
        run,
        'At the limit: voltage against current',
      );
    case 'curve':
      return curveOf(
        counting.filter(({ phase }) => kinds[phase] === 'curve'),
        run,
        'Voltage against current',
      );
  }
}

function curveOf(
  points: readonly ViewedPoint[],
  { rated }: Pick<ViewedRun, 'rated'>,
  title: string,
): Chart | undefined {
  const marks = points.flatMap((point, index) => {
    const { voltage } = point;
    const current = currentOf(point);
    return current === null || voltage === null
      ? []
      : [{ x: current, y: voltage, look: lookOf(point), joined: joined(point, points[index - 1]) }];
  });
  if (marks.length === 0) return undefined;
  // What fell far down would press flat what held; it is drawn at the edge, and what was read stands in the table.
  const held = marks.filter(({ look }) => look !== 'dropped');
  const y = range(
    (held.length > 0 ? held : marks).map((mark) => mark.y),
    rated.voltage * 0.005,
  );
  const x = { from: 0, to: 1.06 * Math.max(rated.current, ...marks.map((mark) => mark.x)) };
  return {
    title,
    x: { label: 'Current in A', ...x },
    y: { label: 'Voltage in V', ...y },
    marks,
    rated: rated.current,
  };
}

/** A module that has let go delivers nothing: where it did so is told by the current that was asked for. */
function currentOf({ outcome, set, current }: ViewedPoint): number | null {
  return outcome === 'dropped' ? (set.current ?? current) : current;
}

function soakOf(points: readonly ViewedPoint[]): Chart | undefined {
  const warm = points.some(({ temperature }) => temperature !== null);
  const began = points[0]?.t ?? 0;
  const { unit, length } = timeUnit((points.at(-1)?.t ?? 0) - began);
  const marks = points.flatMap((point, index) => {
    const y = warm ? point.temperature : point.voltage;
    return y === null
      ? []
      : [{ x: (point.t - began) / length, y, look: lookOf(point), joined: joined(point, points[index - 1]) }];
  });
  if (marks.length === 0) return undefined;
  return {
    title: warm ? 'Temperature over the time of the soak' : 'Voltage over the time of the soak',
    x: {
      label: `Time in ${unit}`,
      from: 0,
      to: Math.max(10 / length, 1.06 * Math.max(...marks.map(({ x }) => x))),
    },
    y: {
      label: warm ? 'Temperature in °C' : 'Voltage in V',
      ...range(
        marks.map(({ y }) => y),
        warm ? 4 : 0.02,
      ),
    },
    marks,
  };
}

function lookOf({ phase, outcome }: ViewedPoint): MarkLook {
  if (outcome === 'dropped') return 'dropped';
  return phase === 'down' ? 'back' : 'held';
}

function joined(point: ViewedPoint, before: ViewedPoint | undefined): boolean {
  if (before === undefined || !walked.has(point.phase) || !walked.has(before.phase)) return false;
  if (point.outcome === 'dropped' || before.outcome === 'dropped') return false;
  return point.step === before.step || before.phase === 'idle';
}

function timeUnit(span: number): { readonly unit: string; readonly length: number } {
  if (span < 180) return { unit: 's', length: 1 };
  return span < 3 * 3600 ? { unit: 'min', length: 60 } : { unit: 'h', length: 3600 };
}

/** With room above and below, and never so narrow that noise looks like a slope. */
function range(values: readonly number[], least: number): { readonly from: number; readonly to: number } {
  const low = Math.min(...values);
  const high = Math.max(...values);
  const room = Math.max(0, (least - (high - low)) / 2) + 0.08 * Math.max(high - low, least);
  return { from: low - room, to: high + room };
}

/** The chart in words, for those who do not see it: how many points, how many of them fell, and the last. */
export function chartWords(points: readonly ViewedPoint[], run: Pick<ViewedRun, 'rated'>): string {
  const chart = chartOf(points, run);
  const last = points.at(-1);
  if (chart === undefined || last === undefined)
    return points.length === 0 ? 'No points so far.' : 'Nothing of this step is drawn.';
  const { marks } = chart;
  const dropped = marks.filter(({ look }) => look === 'dropped').length;
  const count = marks.length === 1 ? '1 point' : `${marks.length} points`;
  const fell = dropped === 0 ? '' : `, of which ${dropped} did not hold`;
  return `${chart.title}: ${count}${fell}. The last: ${pointCells(last, run)
    .slice(1)
    .filter((cell) => cell !== '–')
    .join(', ')}.`;
}

export const pointHeads = ['set', 'current', 'voltage', 'temperature', 'outcome'] as const;

/** A point as a row of a table. */
export function pointCells(
  { set, current, voltage, temperature, outcome }: ViewedPoint,
  { rated }: Pick<ViewedRun, 'rated'>,
): readonly string[] {
  const { volts, amperes } = decimalsOf(rated);
  const cell = (value: number | null | undefined, decimals: number, unit: string): string =>
    value === null || value === undefined ? '–' : `${fixed(value, decimals)} ${unit}`;
  return [
    set.voltage === undefined ? cell(set.current, amperes, 'A') : cell(set.voltage, volts, 'V'),
    cell(current, amperes, 'A'),
    cell(voltage, volts, 'V'),
    cell(temperature, 1, '°C'),
    outcome === 'dropped' ? 'did not hold' : outcome,
  ];
}
