import type { Ratio } from '../quantity/quantity.js';
import type { CurvePoint } from './curve.js';
import type { Evidence } from './evidence.js';
import { type Finding, measured } from './finding.js';
import { amps } from './in-words.js';
import type { GroupLook } from './module-currents.js';
import { promised, promisedErrors } from './promised-errors.js';
import type { Saturated } from './saturation.js';
import { extremesOf } from './shares.js';

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
  const noted = (note: string): string => [how, note].filter((part) => part !== '').join('; ');
  if (dropout !== undefined) return { ...dropout, name: 'group-current', note: noted(dropout.note) };
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
      note: noted(`nothing dropped up to ${amps(highest.set)}`),
    },
  );
  return { ...finding, bound: 'least' };
}

/** What is known of a parallel group when it comes to how it failed. */
export interface GroupSeen {
  /** The points it held with every module's current known, by rising load. */
  readonly held: readonly GroupLook[];
  readonly looks: readonly GroupLook[];
  readonly saturated: Saturated | undefined;
  readonly dropout: Finding | undefined;
}

/** One module carrying this much of the whole is about the whole. */
const nearlyAll: Ratio = 0.75;

/** How a group failed, or what happened in it though it held: which module met its limit first. */
export function howItFailed(seen: GroupSeen): string {
  const { held, saturated, dropout } = seen;
  const first = saturated === undefined ? '' : firstInWords(saturated, dropout === undefined);
  if (dropout === undefined) return first;
  const last = held.findLast(({ total }) => total <= Number(dropout.value)) ?? held.at(-1);
  if (last === undefined) return first;
  return [first === '' ? failureInWords(last) : first, ...notBack(seen)].join('; ');
}

function firstInWords({ module, how, current, total }: Saturated, holds: boolean): string {
  const then = holds ? ', and the group still holds' : ', and the group went on until the others met theirs';
  return how === 'stays'
    ? `${module} meets its limit first, at ${amps(current)} when the whole takes ${amps(total)}${then}`
    : `${module} left after ${amps(current)} of its own, when the whole took ${amps(total)}, and the others carried it`;
}

function failureInWords(last: GroupLook): string {
  const { most } = extremesOf(last);
  const current = last.currents.find(({ module }) => module === most)?.current ?? 0;
  if (current >= nearlyAll * last.total) {
    return (
      `fails at about what one of them holds: ${most} hogs, carried ${amps(current)} of ${amps(last.total)}, ` +
      `leaves at its limit, and the rest can't carry it`
    );
  }
  const each = last.currents.map((one) => `${one.module} ${amps(one.current)}`).join(', ');
  return `fails when ${most} meets its limit and the rest can't carry it; at ${amps(last.total)} they carried ${each}`;
}

/** Of what it carried before at the same load: less is nothing. */
const nothing: Ratio = 0.1;

/** The modules that gave nothing when the group was loaded again, though they had carried their part there. */
function notBack({ held, looks }: GroupSeen): readonly string[] {
  const after = looks.findLast(({ kind }) => kind === 'after');
  const before = held.find(({ set, step }) => set === after?.set && step === after?.step);
  if (after === undefined || before === undefined) return [];
  return after.currents
    .filter(({ module, current }) => {
      const carried = before.currents.find((one) => one.module === module)?.current ?? 0;
      return carried > before.total / before.currents.length / 4 && current < nothing * carried;
    })
    .map(({ module }) => `${module} did not come back`);
}
