import { formatQuantity } from '../quantity/format-quantity.js';
import type { CurvePoint } from './curve.js';
import type { Evidence } from './evidence.js';
import { type Finding, measured } from './finding.js';
import { promised, promisedErrors } from './promised-errors.js';
import { gone, latched } from './recovery.js';

/** The usable current, and whether a limit of the module sets it or only how far it was tried. */
export interface Usable {
  readonly finding: Finding;
  readonly setBy: 'limit' | 'highest-tried';
}

/**
 * `usable-current`: the largest current at which the module stays within the sag and is steady. It is the
 * lower of the dropout and of the edge of steadiness, lower by what each can be relied on for: the lower
 * ends of their intervals. Where neither was reached it is the highest current that was held, and then it
 * is a least value.
 */
export function usableCurrent(
  evidence: Evidence,
  found: {
    readonly dropout: Finding | undefined;
    readonly unsteady: Finding | undefined;
    readonly held: readonly CurvePoint[];
  },
): Usable | undefined {
  const latch = afterOverload(evidence);
  const lowest = [
    { limit: found.unsteady, because: 'above that its output swings' },
    { limit: found.dropout, because: 'above that it drops out' },
  ]
    .flatMap(({ limit, because }) => (limit === undefined ? [] : [{ limit, because }]))
    .sort((one, other) => lowerEnd(one.limit) - lowerEnd(other.limit))
    .at(0);
  if (lowest === undefined) return highestHeld(evidence, found.held, latch);
  const { limit, because } = lowest;
  return {
    finding: { ...limit, name: 'usable-current', note: `${because}${latch}` },
    setBy: 'limit',
  };
}

function afterOverload(evidence: Evidence): string {
  if (gone(evidence)) return '; it gave no voltage again after that';
  return latched(evidence) ? '; an overload switches it off until its input is cycled' : '';
}

function lowerEnd({ interval, value }: Finding): number {
  return interval === null ? Number(value) : interval[0];
}

function highestHeld(evidence: Evidence, held: readonly CurvePoint[], latch: string): Usable | undefined {
  const highest = held.at(-1);
  if (highest === undefined) return undefined;
  const current = promisedErrors(evidence.header, 'load', 'current');
  const tried = formatQuantity(highest.set, 'current', { significant: 3 });
  const finding = measured(
    'usable-current',
    'current',
    highest.current,
    [
      promised(`${current.of}, gain`, current.gain * highest.current),
      promised(`${current.of}, offset`, current.offset),
      promised(`${current.of}, resolution`, current.resolution),
    ],
    { step: highest.step, note: `at least this much: no limit was met up to ${tried}${latch}` },
  );
  return { finding: { ...finding, bound: 'least' }, setBy: 'highest-tried' };
}
