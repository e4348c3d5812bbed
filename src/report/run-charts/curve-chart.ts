import type { Markup } from '../page/markup.js';
import type { Result } from '../result.js';

/** The figure of V against I; undefined where the record has nothing for it. */
export function curveFigure(_result: Result): Markup | undefined {
  return undefined;
}
