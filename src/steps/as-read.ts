import type { Taken } from '../bench/sample.js';
import type { ReadingTaken } from '../record/journal-event.js';

/** What was taken, as the journal keeps it: null, and why, where the instrument said that it has no value. */
export function asRead({
  of,
  what,
  at,
  measurement,
}: Taken): Pick<ReadingTaken, 'of' | 'what' | 'at' | 'value' | 'problem'> {
  const read =
    measurement.kind === 'value' ? { value: measurement.value } : { value: null, problem: measurement.kind };
  return { of, what, ...(at === undefined ? {} : { at }), ...read };
}
