import type { Markup } from '../page/markup.js';
import type { Result } from '../result.js';

/** The figure of the temperature over time; undefined where the record has nothing for it. */
export function soakFigure(_result: Result): Markup | undefined {
  return undefined;
}
