import { type Contribution, combine } from '../statistics/uncertainty-budget.js';
import { normalQuantile } from '../statistics/normal.js';
import type { Estimate } from './build.js';
import type { Taken, TakenContribution } from './module-profile.js';

/** A measured number and how often it goes into a sum: −2 where it is taken off twice. */
export interface Addend {
  readonly taken: Taken;
  readonly times: number;
}

/** Σ times·value, with the budget that it has. */
export interface Sum {
  readonly value: number;
  readonly budget: readonly Contribution[];
}

/**
 * Adds up measured numbers with their budgets (JCGM 100:2008, 5.1.2 and 5.2.2). Lines that are the same error,
 * such as the gain of the meter that measured several modules, add up as they are, for it moves all the same
 * way; what is left is independent and adds in squares. That the droop and the open-circuit voltage of one
 * module were found from the same points is left out: where the droop is taken off, as in V − R·I, that makes
 * the interval a little wider than it need be.
 */
export function sumOf(addends: readonly Addend[]): Sum {
  const own: Contribution[] = [];
  const shared = new Map<string, Contribution>();
  for (const { taken, times } of addends) {
    for (const { shared: key, ...line } of linesOf(taken)) {
      const moved = { ...line, uncertainty: times * line.uncertainty };
      if (key === undefined) own.push({ ...moved, uncertainty: Math.abs(moved.uncertainty) });
      else shared.set(key, together(shared.get(key), moved));
    }
  }
  const common = [...shared.values()].map((line) => ({ ...line, uncertainty: Math.abs(line.uncertainty) }));
  return {
    value: addends.reduce((total, { taken, times }) => total + times * taken.value, 0),
    budget: [...common, ...own],
  };
}

/** The sum with the interval that holds it with 95 %; nothing added up is 0 for certain. */
export function addedUp(addends: readonly Addend[]): Estimate {
  const { value, budget } = sumOf(addends);
  const expanded = budget.length === 0 ? 0 : combine(budget).expanded;
  return { value, low: value - expanded, high: value + expanded };
}

/** The lines of a number's budget; where its record gave none, one that comes to its interval. */
export function linesOf({ budget, interval: [low, high] }: Taken): readonly TakenContribution[] {
  if (budget.length > 0) return budget;
  return [
    {
      name: 'its interval',
      kind: 'B',
      uncertainty: (high - low) / 2 / normalQuantile(0.975),
      degreesOfFreedom: Number.POSITIVE_INFINITY,
      shared: undefined,
    },
  ];
}

function together(known: Contribution | undefined, line: Contribution): Contribution {
  if (known === undefined) return line;
  return {
    ...known,
    uncertainty: known.uncertainty + line.uncertainty,
    degreesOfFreedom: Math.min(known.degreesOfFreedom, line.degreesOfFreedom),
  };
}
