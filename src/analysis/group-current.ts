import type { CurvePoint } from './curve.js';
import type { Evidence } from './evidence.js';
import { type Finding, measured } from './finding.js';
import { amps } from './in-words.js';
import { promised, promisedErrors } from './promised-errors.js';

/**
 * `group-current`: what the circuit of several modules holds. Where it was seen to drop out it is the
 * dropout's, else the highest current that was held, which is then a least value.
 * @param how what is known of how it failed, or of what happened on the way; empty when nothing is.
 */
export function groupCurrent(
  evidence: Evidence,
  found: { readonly dropout: Finding | undefined; readonly held: readonly CurvePoint[] },
  how: string,
): Finding | undefined {
  const { dropout, held } = found;
  if (dropout !== undefined) {
    return { ...dropout, name: 'group-current', note: how === '' ? dropout.note : how };
  }
  const highest = held.at(-1);
  if (highest === undefined) return undefined;
  const load = promisedErrors(evidence.header, 'load', 'current');
  const finding = measured(
    'group-current',
    'current',
    highest.current,
    [
      promised(`${load.of}, gain`, load.gain * highest.current),
      promised(`${load.of}, offset`, load.offset),
      promised(`${load.of}, resolution`, load.resolution),
    ],
    {
      step: highest.step,
      note: [how, `nothing dropped up to ${amps(highest.set)}`].filter((part) => part !== '').join('; '),
    },
  );
  return { ...finding, bound: 'least' };
}
