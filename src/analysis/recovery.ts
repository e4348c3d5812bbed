import { type Contribution, rectangular } from '../statistics/uncertainty-budget.js';
import type { Evidence } from './evidence.js';
import { type Finding, inWords, measured } from './finding.js';
import { promised } from './promised-errors.js';

/**
 * `recovery-time`: the slowest of the recoveries after an overload, from the load's going off to the
 * voltage's being back; between the last look without it and the first with it. How long the next one
 * takes differs by the spread of those seen: a module that tries again each period may have been unloaded
 * just before it tries, or just after. One across which a connection was lost was not timed, and
 * counts only where there is no other. Of a module that stayed away it is at least as long as it was waited
 * for, so that it can fail a criterion and never pass one.
 */
export function recoveryFindings(evidence: Evidence): readonly Finding[] {
  const away = stayedAway(evidence);
  if (away !== undefined) return [away];
  const cameBack = evidence.steps.flatMap(({ step, recoveries }) =>
    recoveries.filter(({ outcome }) => outcome === 'came-back').map((recovery) => ({ ...recovery, step })),
  );
  const timed = cameBack.filter(({ untimed }) => untimed !== true);
  const recoveries = timed.length > 0 ? timed : cameBack;
  const slowest = recoveries.reduce<(typeof recoveries)[number] | undefined>(
    (slow, one) => (slow === undefined || one.within > slow.within ? one : slow),
    undefined,
  );
  if (slowest === undefined) return [];
  return [
    measured(
      'recovery-time',
      'time',
      (slowest.after + slowest.within) / 2,
      [
        promised('between two looks', rectangular(Math.abs(slowest.within - slowest.after) / 2)),
        ...spreadOf(recoveries.map(({ after, within }) => (after + within) / 2)),
      ],
      { step: slowest.step, note: noteOf(slowest, recoveries.length) },
    ),
  ];
}

/** The longest wait for a voltage that did not come back by itself. */
function stayedAway({ steps }: Evidence): Finding | undefined {
  const [longest] = steps
    .flatMap(({ step, recoveries }) =>
      recoveries.flatMap(({ outcome, within }) => (outcome === 'stayed-off' ? [{ step, within }] : [])),
    )
    .sort((one, other) => other.within - one.within);
  if (longest === undefined) return undefined;
  const note = 'it stays off after an overload, until its input is cycled';
  const untold = inWords('recovery-time', '', { step: longest.step, note });
  return { ...untold, value: longest.within, dimension: 'time', bound: 'least' };
}

/** Evenly anywhere between the quickest and the slowest: too few are seen for the scatter to be an estimate. */
function spreadOf(times: readonly number[]): readonly Contribution[] {
  if (times.length < 2) return [];
  const range = Math.max(...times) - Math.min(...times);
  return [promised('from one recovery to the next', rectangular(range / 2))];
}

function noteOf({ after }: { readonly after: number }, count: number): string {
  const which = count === 1 ? 'one recovery' : `the slowest of ${count}`;
  return after === 0 ? `${which}; back before the first look` : which;
}

/** Whether the module ever stayed off after an overload. */
export function latched(evidence: Evidence): boolean {
  return evidence.steps.some((step) => step.recoveries.some((recovery) => recovery.outcome !== 'came-back'));
}

/** Whether the module stayed off even after its input was cycled: it is broken, or its input is gone. */
export function gone(evidence: Evidence): boolean {
  return evidence.steps.some(({ recoveries }) =>
    recoveries.some(
      ({ outcome }, index) => outcome === 'stayed-off' && recoveries[index + 1]?.outcome === 'stayed-off',
    ),
  );
}
