import type { Result } from './result.js';

/** Steps whose readings stand in both records. */
export interface SharedSteps {
  /** The record in which they were made. */
  readonly run: string;
  readonly first: number;
  readonly last: number;
}

interface Part extends SharedSteps {
  /** SHA-256 of the run.json of the record in which they were made: its folder may have been given another name. */
  readonly header: string;
}

/** Where one record was resumed from the other, or both from a third: what one of them took over from it. */
export function sharedSteps(before: Result, after: Result): readonly SharedSteps[] {
  const later = partsOf(after);
  return partsOf(before).flatMap((part) =>
    later.flatMap((other) => {
      const [first, last] = [Math.max(part.first, other.first), Math.min(part.last, other.last)];
      return part.header === other.header && first <= last ? [{ run: part.run, first, last }] : [];
    }),
  );
}

/** What a record is made of: what it took over from others, and what it measured itself. */
function partsOf({ run, fingerprints, evidence }: Result): readonly Part[] {
  const { resumed, steps } = evidence;
  const own = { run, header: fingerprints.header, steps: Math.max(0, ...steps.map(({ step }) => step)) };
  return [...resumed, own].flatMap(({ run: name, header, steps: last }, index, all) => {
    const first = (all[index - 1]?.steps ?? 0) + 1;
    return last < first ? [] : [{ run: name, header, first, last }];
  });
}
