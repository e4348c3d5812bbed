import type { ChartLine } from '../chart/drawn-line.js';
import type { ChartPoint, PointSort } from '../chart/point-chart.js';
import type { Shape } from '../chart/shapes.js';
import { thinned } from '../chart/thinned.js';

/** Told apart without their colour; a ninth member has the first one's shape in another colour. */
const shapes = [
  'circle',
  'square',
  'diamond',
  'triangle-down',
  'triangle-up',
  'plus',
  'hexagon',
  'cross',
] as const satisfies readonly Shape[];

/** How the points and the line of a member are drawn, by its place in the circuit, from 0: the same in each chart. */
export function memberLook(place: number): Pick<PointSort, 'shape' | 'look'> {
  return { shape: shapes[place % shapes.length] ?? 'circle', look: place };
}

/** A line has so many stretches at most, in each of which its highest and its lowest point stay. */
const stretches = 150;

/** Through points in the order of x, its name at its end. */
export function lineThrough(name: string, points: readonly ChartPoint[], look: number): ChartLine {
  const kept = thinned(points, stretches);
  return { name, xs: kept.map(({ x }) => x), ys: kept.map(({ y }) => y), look };
}

/** Reckoned when it is first asked for: of many points few are drawn. */
export function once<T>(reckoned: () => T): () => T {
  let known: { readonly value: T } | undefined;
  return () => (known ??= { value: reckoned() }).value;
}
