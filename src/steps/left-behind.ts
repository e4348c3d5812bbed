import type { StepContext } from './step-kind.js';

/**
 * Says what hands were asked to do and may not have been asked to undo, where a step ends early: whoever
 * comes to the bench next must know, and the record too. What ended the step is still what is told first.
 */
export function sayWhatIsLeft({ journal }: Pick<StepContext, 'journal'>, text: string): void {
  try {
    journal.append({ event: 'notice', text });
  } catch {
    // The journal may be what failed, and what failed first is what must be told.
  }
}
