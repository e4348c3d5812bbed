import type { Markup } from '../page/markup.js';
import type { Result } from '../result.js';

/** The figure of what the readings differ by from the fitted line; undefined where the record has nothing for it. */
export function residualsFigure(_result: Result): Markup | undefined {
  return undefined;
}
