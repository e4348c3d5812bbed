import type { Amperes } from '../quantity/quantity.js';
import type { ModuleProfile } from './module-profile.js';
import { type Heard, heardOf, type ModuleRecords, newestOfEach, sourceOf } from './module-records.js';

/**
 * The lowest that the newest record of each procedure recommends: a soak's counts beside that of the limit, and
 * one from before a change too, as it can only make it less. One that says "no more was tried" is no limit, and
 * counts only where no other speaks. Undefined where no record recommends anything.
 */
export function recommendedOf(module: ModuleRecords): ModuleProfile['recommended'] | undefined {
  const all = newestOfEach(heardOf(module, 'recommended-current'));
  const limits = all.filter(({ finding }) => finding.bound === undefined);
  const lowest = (limits.length > 0 ? limits : all)
    .toSorted((one, other) => amperesOf(one) - amperesOf(other))
    .at(0);
  if (lowest === undefined) return undefined;
  const { record, finding } = lowest;
  const why = wasWarmed(module) ? finding.note : `${finding.note}; measured cold`;
  return { current: amperesOf(lowest), why, from: sourceOf(record) };
}

/** What is no number recommends nothing. */
function amperesOf({ finding: { value } }: Heard): Amperes {
  return typeof value === 'number' && Number.isFinite(value) ? value : 0;
}

/** Whether any soak showed how warm it gets. */
export function wasWarmed(module: ModuleRecords): boolean {
  return heardOf(module, 'temperature-rise').length > 0;
}
