import { sourceOf, type Heard } from './module-records.js';
import type { Taken } from './module-profile.js';
import { sharedError } from './shared-errors.js';

/** A measured number as it is taken over; undefined for a word, for one that is no number, and for one without an interval that is one. */
export function takenFrom({ record, finding }: Heard): Taken | undefined {
  const { value, interval, bound, budget, note } = finding;
  if (typeof value !== 'number' || interval === null) return undefined;
  if (![value, ...interval].every(Number.isFinite) || interval[0] > interval[1]) return undefined;
  return {
    value,
    interval,
    ...(bound === undefined ? {} : { bound }),
    budget: budget.map((line) => ({ ...line, shared: sharedError(record.header, finding, line) })),
    from: sourceOf(record),
    note,
  };
}

/** The same where less than nothing can't be: what was read below 0 was read wrong by that much at least. */
export function notBelowZero(taken: Taken): Taken {
  const [low, high] = taken.interval;
  return {
    ...taken,
    value: Math.max(0, taken.value),
    interval: [Math.max(0, low), Math.max(0, high)],
  };
}
