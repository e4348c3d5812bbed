import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes } from '../quantity/quantity.js';
import { rectangular } from '../statistics/uncertainty-budget.js';
import { stepsOf } from './curve.js';
import type { Evidence, StepEvidence } from './evidence.js';
import { type Finding, measured } from './finding.js';
import { amps } from './in-words.js';
import { promised, promisedErrors } from './promised-errors.js';

/**
 * What a module holds when warm, where a soak ended in a dropout: between the highest current that another
 * soak held for as long and the one that was dropped. The currents that a ramp or a search held do not
 * count: the module was cold then. Without another soak it lies anywhere from nothing up, and the finding's
 * lower bound says so. Undefined where no soak dropped out after having held at first.
 *
 * It is kept apart from `dropout-current`, which is the limit of a module that has not been worked for long.
 */
export function warmDropout(evidence: Evidence): Finding | undefined {
  const soaks = stepsOf(evidence, 'soak').flatMap(soakOf);
  const dropped = soaks
    .filter(({ ended }) => ended === 'dropped')
    .sort((one, other) => one.current - other.current)
    .at(0);
  if (dropped === undefined) return undefined;
  const held = soaks
    .filter(
      ({ ended, current, after }) => ended === 'held' && current < dropped.current && after >= dropped.after,
    )
    .reduce((most, { current }) => Math.max(most, current), 0);
  const value = (held + dropped.current) / 2;
  const current = promisedErrors(evidence.header, 'load', 'current');
  const after = formatQuantity(dropped.after, 'time', { significant: 2 });
  return measured(
    'usable-current',
    'current',
    value,
    [
      promised('between what a soak held and what it dropped', rectangular((dropped.current - held) / 2)),
      promised(`${current.of}, gain`, current.gain * value),
      promised(`${current.of}, offset`, current.offset),
    ],
    {
      step: dropped.step,
      note:
        `warm it drops out at ${amps(dropped.current)}, after ${after}; ` +
        (held > 0
          ? `a soak held ${amps(held)}`
          : 'no soak has shown what it holds when warm: soak it at less'),
    },
  );
}

interface SoakEnd {
  readonly step: number;
  readonly current: Amperes;
  readonly ended: 'held' | 'dropped';
  /** From the first look to the last. */
  readonly after: number;
}

/** Of a soak that held its current for a look at least; one that dropped at once was beyond the cold limit. */
function soakOf({ step, points }: StepEvidence): readonly SoakEnd[] {
  const looks = points.filter(({ phase, outcome }) => phase === 'soak' && outcome !== undefined);
  const [first] = looks;
  const last = looks.at(-1);
  if (first?.outcome !== 'held' || last === undefined || first.current.count === 0) return [];
  const ended = last.outcome === 'dropped' ? 'dropped' : 'held';
  return [{ step, current: first.current.mean, ended, after: last.t - first.t }];
}
