import type { CurvePoint } from './curve.js';
import type { Evidence } from './evidence.js';
import type { Soaked } from './derating.js';
import { type Finding, measured } from './finding.js';
import { amps } from './in-words.js';
import { promised, promisedErrors } from './promised-errors.js';
import { gone, latched } from './recovery.js';
import { thermalLimit } from './thermal-limit.js';

/** The usable current, and whether a limit of the module sets it, its temperature, or only how far it was tried. */
export interface Usable {
  readonly finding: Finding;
  readonly setBy: 'limit' | 'temperature' | 'highest-tried';
}

/**
 * `usable-current`: the largest current at which the module stays within the sag, is steady, and settles
 * within its limit of temperature where a soak settled beyond it. It is the lowest of the dropout, cold and
 * (where a soak ended in one) warm, the edge of steadiness and that thermal limit, lowest by what each can be relied on for: the lower ends of their
 * intervals. Where none was reached it is the highest current that was held, and then it is a least value.
 */
export function usableCurrent(
  evidence: Evidence,
  found: {
    readonly dropout: Finding | undefined;
    readonly unsteady: Finding | undefined;
    readonly held: readonly CurvePoint[];
    readonly soaked?: Soaked | undefined;
    /** What it holds when warm, where a soak ended in a dropout. */
    readonly warm?: Finding | undefined;
  },
): Usable | undefined {
  const latch = afterOverload(evidence);
  const thermal = thermalLimit(evidence, found.soaked);
  const lowest = [
    { limit: found.unsteady, because: 'above that its output swings', setBy: 'limit' as const },
    { limit: found.dropout, because: 'above that it drops out', setBy: 'limit' as const },
    { limit: found.warm, because: found.warm?.note ?? '', setBy: 'limit' as const },
    { limit: thermal, because: thermal?.note ?? '', setBy: 'temperature' as const },
  ]
    .flatMap(({ limit, ...rest }) => (limit === undefined ? [] : [{ limit, ...rest }]))
    .sort((one, other) => lowerEnd(one.limit) - lowerEnd(other.limit))
    .at(0);
  if (lowest === undefined) return highestHeld(evidence, found.held, latch);
  const { limit, because, setBy } = lowest;
  return { finding: { ...limit, name: 'usable-current', note: `${because}${latch}` }, setBy };
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
  const finding = measured(
    'usable-current',
    'current',
    highest.current,
    [
      promised(`${current.of}, gain`, current.gain * highest.current),
      promised(`${current.of}, offset`, current.offset),
      promised(`${current.of}, resolution`, current.resolution),
    ],
    { step: highest.step, note: `no limit was met up to ${amps(highest.set)}${latch}` },
  );
  return { finding: { ...finding, bound: 'least' }, setBy: 'highest-tried' };
}
