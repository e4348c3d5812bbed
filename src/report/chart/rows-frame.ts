import type { Dimension } from '../../quantity/quantity.js';
import { axisOf, domainOf } from './axis.js';
import type { Frame } from './frame.js';
import { roomForMarks, type VerticalMark } from './marks.js';
import { lineHeight } from './text-width.js';

/** In units of the drawing. */
export const rowsWidth = 560;
export const rowsLeft = 6;
export const barHeight = 14;

/**
 * The frame of rows below each other on one axis that begins at zero: there is no axis upwards, the marks stand above
 * the first row.
 * @param bottomOf where the rows end that begin there.
 */
export function rowsFrame(
  label: { readonly label: string; readonly dimension: Dimension },
  values: readonly number[],
  marks: readonly VerticalMark[],
  bottomOf: (top: number) => number,
): Frame {
  const { to } = domainOf([...values, ...marks.map(({ at }) => at)], 0);
  const x = axisOf({ ...label, from: 0, to }, [rowsLeft, rowsWidth - 14], 8);
  const top = 8 + roomForMarks(marks, x, rowsWidth);
  const bottom = bottomOf(top);
  return {
    width: rowsWidth,
    height: bottom + 22 + lineHeight + 6,
    x,
    y: { label: '', at: () => bottom, start: bottom, end: top, ticks: [] },
  };
}
