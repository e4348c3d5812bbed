import type { Compared } from './compare.js';
import type { Comparable, Difference } from './difference.js';

/**
 * Whether a finding is other than it was, whatever may be:
 * - `moved`: by more than both uncertainties together leave open, or from one word to another;
 * - `as-it-was`: not by more than that;
 * - `as-it-stands`: its uncertainty is not known in both records, so nobody can say by how much chance alone moves it;
 * - `not-told`: only one record has it, it could not be told, or it is a least value that may be more.
 */
export type Movement = 'moved' | 'as-it-was' | 'as-it-stands' | 'not-told';

/** Quantities by E_n: beyond 1 either way it moved (ISO/IEC 17043). What was judged `changed` moved for certain. */
export function movementOf({ before, after, difference, verdict }: Compared): Movement {
  if (verdict === 'changed') return 'moved';
  if (before === undefined || after === undefined) return 'not-told';
  if (difference === undefined) return movementOfWords(before, after);
  if (before.bound !== undefined || after.bound !== undefined)
    return movementOfBounds(before, after, difference);
  const { expanded, normalizedError, value } = difference;
  if (normalizedError === null) return value === 0 ? 'as-it-was' : 'as-it-stands';
  if (!Number.isFinite(expanded)) return 'not-told';
  return Math.abs(normalizedError) > 1 ? 'moved' : 'as-it-was';
}

function movementOfWords(before: Comparable, after: Comparable): Movement {
  if (before.value === 'undetermined' || after.value === 'undetermined') return 'not-told';
  const areWords = typeof before.value === 'string' && typeof after.value === 'string';
  if (areWords) return before.value === after.value ? 'as-it-was' : 'moved';
  return isChosen(before) && isChosen(after) ? 'as-it-stands' : 'not-told';
}

/** A recommendation is a value or a word such as `none`; neither has an uncertainty. */
function isChosen({ standardUncertainty }: Comparable): boolean {
  return standardUncertainty === null;
}

/** Of a least value only that can be told which lies on the other side of it. */
function movementOfBounds(before: Comparable, after: Comparable, { value, expanded }: Difference): Movement {
  if (before.bound !== undefined && after.bound !== undefined) return 'not-told';
  const away = before.bound === undefined ? value : -value;
  if (expanded === null) return away > 0 ? 'as-it-stands' : 'not-told';
  return away > expanded ? 'moved' : 'not-told';
}
