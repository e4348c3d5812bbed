import { percent } from '../analysis/in-words.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import { listed } from '../quantity/listed.js';
import { asMeasured, type Spread } from './assignment.js';
import type { Selection } from './selection.js';

/** What adding in another order changes is no difference. */
const arithmetic = 1e-9;

/**
 * By how much the best is ahead of the next best, and whether the records can tell: they can where the best, at the
 * worst that its records allow, is still ahead of the next best with its modules just as they were measured. The
 * currents decide; where they are the same the imbalances do.
 */
export function marginOf(best: Spread, next: Spread, tolerance: number): NonNullable<Selection['margin']> {
  const current = best.limit - next.limit;
  const imbalance = next.imbalance - best.imbalance;
  const likely = asMeasured(next, tolerance);
  if (current > arithmetic * best.limit) {
    const told = best.limit > likely.limit;
    const ahead = `The best is ahead of the next best by ${formatQuantity(current, 'current', { significant: 2 })}`;
    return { current, imbalance, told, sentence: `${ahead}, ${inWords(told)}.` };
  }
  if (imbalance > arithmetic) {
    const told = best.imbalance < likely.imbalance;
    const ahead = `Both may be asked for the same; the best shares more evenly by ${percent(imbalance)} of the mean current`;
    return { current: 0, imbalance, told, sentence: `${ahead}, ${inWords(told)}.` };
  }
  return {
    current: 0,
    imbalance: 0,
    told: false,
    sentence: `The next best is worth as much${limitedAlike(best, next)}: either will do.`,
  };
}

/** Where the weakest group of the one is in the other too, neither can be worth more than it. */
function limitedAlike(best: Spread, next: Spread): string {
  const weakest = best.supplies.flat().find(({ limit }) => limit === best.limit)?.modules ?? [];
  const isInNext = next.supplies
    .flat()
    .some(
      ({ modules }) => modules.length === weakest.length && modules.every((each) => weakest.includes(each)),
    );
  if (!isInNext) return '';
  const names = listed(weakest.map(({ name }) => name));
  return weakest.length === 1 ? `, as ${names} limits it too` : `, as ${names} together limit it too`;
}

function inWords(told: boolean): string {
  return told
    ? 'which is more than the records leave open'
    : 'which is less than the records leave open: either will do';
}
