import type { Shape } from '../chart/shapes.js';

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
export function memberLook(place: number): { readonly shape: Shape; readonly look: number } {
  return { shape: shapes[place % shapes.length] ?? 'circle', look: place };
}
