import type { Markup } from '../page/markup.js';
import type { Result } from '../result.js';

/** The figure of the current past the limit; undefined where the record has nothing for it. */
export function limitTraceFigure(_result: Result): Markup | undefined {
  return undefined;
}
