import { wordWrap } from '../../quantity/word-wrap.js';
import { DotGrid, placed } from './dot-grid.js';
import { scaleOf, shareOf, type Scale } from './scale.js';

export interface Plot {
  /** With what stands on its axes: `Voltage in V over current in A`. */
  readonly title: string;
  readonly points: readonly PlotPoint[];
  readonly marks: readonly Mark[];
  /** What else is to be said below. */
  readonly key: readonly string[];
}

export interface PlotPoint {
  readonly x: number;
  readonly y: number;
  /** Instead of a point: `x`. */
  readonly sign?: string;
}

/** A letter at a place of the x axis, and what it stands for. */
export interface Mark {
  readonly letter: string;
  readonly x: number;
  readonly says: string;
}

export interface Size {
  readonly width: number;
  readonly height: number;
  readonly unicode: boolean;
}

const leastWidth = 30;
const leastHeight = 5;
const leastField = 16;

/**
 * A chart in signs, no wider than asked, its field and axis no higher; the key comes below. Points that are no numbers
 * are left out. No lines where nothing is left to show or there is no room.
 */
export function plotted(plot: Plot, { width, height, unicode }: Size): readonly string[] {
  const points = plot.points.filter(({ x, y }) => Number.isFinite(x) && Number.isFinite(y));
  const marks = plot.marks.filter(({ x }) => Number.isFinite(x));
  if (points.length === 0 || width < leastWidth || height < leastHeight) return [];
  const yScale = scaleOf(
    points.map(({ y }) => y),
    Math.max(2, Math.floor((height - 2) / 3)),
  );
  const xs = [...points, ...marks].map(({ x }) => x);
  if (yScale === undefined) return [];
  const left = Math.max(...yScale.ticks.map(({ label }) => label.length), 1) + 1;
  const across = width - left - 1;
  const xScale = scaleOf(xs, Math.max(2, Math.floor(across / 10)));
  if (xScale === undefined || across < leastField) return [];
  const grid = new DotGrid(across, height - 2, unicode);
  for (const { x, y, sign } of points) {
    const at = [shareOf(xScale, x), shareOf(yScale, y)] as const;
    if (sign === undefined) grid.dot(...at);
    else grid.sign(...at, sign);
  }
  const columns = marks.map((mark) => ({ ...mark, column: placed(shareOf(xScale, mark.x), across) }));
  for (const { column } of columns) grid.upright(column);
  const says = [...marks.map(({ letter, says }) => `${letter} ${says}`), ...plot.key];
  return [
    ...wordWrap(plot.title, width).split('\n'),
    ...withYAxis(grid.rows(), yScale, left, unicode),
    ...xAxis(xScale, across, unicode).map((line) => `${' '.repeat(left)}${line}`),
    ...letterRows(columns).map((line) => `${' '.repeat(left + 1)}${line}`),
    ...(says.length === 0 ? [] : wordWrap(says.join('; '), width).split('\n')),
  ]
    .map((line) => line.trimEnd())
    .filter((line) => Array.from(line).length <= width);
}

function withYAxis(rows: readonly string[], scale: Scale, left: number, unicode: boolean): string[] {
  const labels = new Map(
    scale.ticks.map(({ value, label }) => [placed(1 - shareOf(scale, value), rows.length), label]),
  );
  return rows.map((row, at) => {
    const label = labels.get(at);
    const line = unicode ? (label === undefined ? '│' : '┤') : label === undefined ? '|' : '+';
    return `${(label ?? '').padStart(left - 1)} ${line}${row}`;
  });
}

/** The line with its ticks, and what is written below them where there is room. */
function xAxis(scale: Scale, across: number, unicode: boolean): string[] {
  const [corner, line, tick] = unicode ? ['└', '─', '┬'] : ['+', '-', '+'];
  const signs = Array.from({ length: across }, () => line);
  let labels = '';
  for (const { value, label } of scale.ticks) {
    const column = placed(shareOf(scale, value), across);
    const start = Math.max(0, column + 1 - Math.floor(label.length / 2));
    const isFree = start === 0 ? labels === '' : start > labels.length;
    if (!isFree || start + label.length > across + 1) continue;
    signs[column] = tick;
    labels = labels.padEnd(start) + label;
  }
  return [`${corner}${signs.join('')}`, labels];
}

/** Letters below their places; those that would touch stand on rows of their own. */
function letterRows(marks: readonly { readonly letter: string; readonly column: number }[]): string[] {
  const rows: string[] = [];
  for (const { letter, column } of [...marks].sort((one, other) => one.column - other.column)) {
    const free = rows.findIndex(({ length }) => length < column);
    const row = free === -1 ? rows.push('') - 1 : free;
    rows[row] = (rows[row] ?? '').padEnd(column) + letter;
  }
  return rows;
}
