import type { Ratio } from '../quantity/quantity.js';
import type { RunHeader } from '../record/run-header.js';
import type { Finding } from './finding.js';
import { amps } from './in-words.js';
import { expandedCurrent, type GroupLook } from './module-currents.js';
import type { Saturated } from './saturation.js';
import { carriedAt, type Carried } from './shares.js';

/** What is known of a parallel group when it comes to how it failed. */
export interface GroupSeen {
  /** The points it held with every module's current known, by rising load. */
  readonly held: readonly GroupLook[];
  readonly looks: readonly GroupLook[];
  readonly saturated: Saturated | undefined;
  readonly dropout: Finding | undefined;
  /** The `limit-style` of the whole group, where it was told. */
  readonly style: string | undefined;
}

/** One module carrying this much of the whole is about the whole. */
const nearlyAll: Ratio = 0.75;
/** Of a look: a dropout further above it tells nothing of who carried what then. */
const near: Ratio = 1.25;
/** One that is worked by this factor harder than the next, by their labels, is likely the first at its limit. */
const clearlyHarder = 1.1;

/**
 * How a group failed, or what happened in it though it held. Which module met its limit first is a fact only
 * where the looks show it; else it is said to be likely, or not at all. Where the current stays under
 * overload nobody leaves: then all are at their limits, and the group holds the sum of them.
 */
export function howItFailed(header: RunHeader, seen: GroupSeen): string {
  const { held, saturated, dropout, style } = seen;
  const first = saturated === undefined ? '' : firstInWords(saturated, dropout === undefined);
  if (dropout === undefined) return first;
  const last = held.findLast(({ total }) => total <= Number(dropout.value)) ?? held.at(-1);
  if (last === undefined) return first;
  if (!isTold(header, last)) return first;
  const labels = new Map(header.modules.map(({ name, rated }) => [name, rated.current]));
  const failure = failureInWords(last, { value: Number(dropout.value), style, labels });
  return [first === '' ? failure : first, ...notBack(seen)].join('; ');
}

/** Each module's current is known to less than what would make one that carries nothing pass for a hog. */
function isTold(header: RunHeader, look: GroupLook): boolean {
  return look.currents.every(
    (_, index) => expandedCurrent(header, look, index) < (1 - nearlyAll) * look.total,
  );
}

function firstInWords({ module, how, current, total }: Saturated, holds: boolean): string {
  const then = holds ? ', and the group still holds' : ', and the group went on until the others met theirs';
  return how === 'stays'
    ? `${module} meets its limit first, at ${amps(current)} when the whole takes ${amps(total)}${then}`
    : `${module} left after ${amps(current)} of its own, when the whole took ${amps(total)}, and the others carried it`;
}

/** The styles with which a module leaves a group that pushes it past its limit. */
const leaving = ['hiccup', 'foldback', 'latch-off'];

function failureInWords(
  last: GroupLook,
  dropped: {
    readonly value: number;
    readonly style: string | undefined;
    readonly labels: ReadonlyMap<string, number>;
  },
): string {
  const carried = [...carriedAt(last)].sort((one, other) => other.current - one.current);
  const [most] = carried;
  const each = `at ${amps(last.total)} they carried ${carried.map((one) => `${one.module} ${amps(one.current)}`).join(', ')}`;
  const { value, style, labels } = dropped;
  if (style === 'constant-current') {
    return `it fails when all of them are at their limits: none leaves, the current stays; ${each}`;
  }
  if (most !== undefined && most.current >= nearlyAll * last.total && value <= near * last.total) {
    return (
      `it fails at about what one of them holds: ${most.module} hogs, carried ${amps(most.current)} of ${amps(last.total)}, ` +
      `leaves at its limit, and the rest can't carry it`
    );
  }
  if (style === undefined || !leaving.includes(style)) return each;
  const who = likelyFirst(carried, labels);
  return `it fails when one of them leaves at its limit and the rest can't carry it${who}; ${each}`;
}

function likelyFirst(carried: readonly Carried[], labels: ReadonlyMap<string, number>): string {
  const [first, second] = carried
    .map(({ module, current }) => ({ module, worked: current / (labels.get(module) ?? Number.NaN) }))
    .sort((one, other) => other.worked - one.worked);
  if (first === undefined || second === undefined) return '';
  return first.worked > clearlyHarder * second.worked
    ? `, most likely ${first.module}, which was worked hardest`
    : '';
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
