import { formatQuantity } from '../quantity/format-quantity.js';
import type { CurvePoint } from './curve.js';
import type { Evidence } from './evidence.js';
import { type Finding, measured } from './finding.js';
import { promised, promisedErrors } from './promised-errors.js';
import { latched } from './recovery.js';

/**
 * `usable-current`: the largest current at which the module stays within the sag and is steady. It is the
 * lower of the dropout and of the edge of steadiness; where neither was reached it is the highest current
 * that was held, and then it is a least value.
 */
export function usableFindings(
  evidence: Evidence,
  found: {
    readonly dropout: Finding | undefined;
    readonly unsteady: Finding | undefined;
    readonly held: readonly CurvePoint[];
  },
): readonly Finding[] {
  const latch = latched(evidence) ? '; an overload switches it off until its input is cycled' : '';
  const limits = [
    { finding: found.unsteady, because: 'its output swings above' },
    { finding: found.dropout, because: 'it drops out above' },
  ].flatMap(({ finding, because }) => (finding === undefined ? [] : [{ finding, because }]));
  const lowest = limits.sort((one, other) => Number(one.finding.value) - Number(other.finding.value)).at(0);
  if (lowest !== undefined) {
    return [{ ...lowest.finding, name: 'usable-current', note: `${lowest.because}${latch}` }];
  }
  const highest = found.held.at(-1);
  if (highest === undefined) return [];
  const current = promisedErrors(evidence.header, 'load', 'current');
  return [
    measured(
      'usable-current',
      'current',
      highest.current,
      [
        promised(`${current.of}, gain`, current.gain * highest.current),
        promised(`${current.of}, offset`, current.offset),
      ],
      {
        step: highest.step,
        note: `at least this much: no limit was met up to ${formatQuantity(highest.set, 'current', { significant: 3 })}`,
      },
    ),
  ];
}
