import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes } from '../quantity/quantity.js';
import { fitLine } from '../statistics/line-fit.js';
import { rectangular } from '../statistics/uncertainty-budget.js';
import { heldPoints, type CurvePoint } from './curve.js';
import type { Evidence, StepEvidence } from './evidence.js';
import { type Finding, measured } from './finding.js';
import { promised, promisedErrors } from './promised-errors.js';

/** What the points of a step say of the dropout, as currents that really flowed. */
export interface DropoutBracket {
  readonly step: number;
  readonly held: Amperes;
  /** Undefined when everything asked for was held. */
  readonly dropped: Amperes | undefined;
  /** A current above `dropped` was held earlier: the limit came down meanwhile. */
  readonly moved: boolean;
}

/** The bracket of the search, or of a ramp that ended early where no search was made. */
export function dropoutBracket(evidence: Evidence): DropoutBracket | undefined {
  const candidates = ['dropout-search', 'load-ramp'].flatMap((kind) =>
    evidence.steps.filter((step) => step.kind === kind).flatMap(bracketOf),
  );
  return candidates.find((bracket) => bracket.dropped !== undefined) ?? candidates.at(0);
}

function bracketOf(step: StepEvidence): readonly DropoutBracket[] {
  const held = heldPoints([step]);
  const dropped = step.points.filter(
    (point) => point.outcome === 'dropped' && point.phase !== 'recovery' && point.set.current !== undefined,
  );
  const lowestDropped = Math.min(...dropped.map((point) => point.set.current ?? Number.POSITIVE_INFINITY));
  const below = held.filter((point) => point.set < lowestDropped);
  const highest = below.at(-1);
  if (highest === undefined) return [];
  return [
    {
      step: step.step,
      held: highest.current,
      dropped: dropped.length === 0 ? undefined : currentAt(lowestDropped, held),
      moved: held.length > below.length,
    },
  ];
}

/**
 * The current that would have been read at a set-point which dropped: at a dropout the reading itself
 * means nothing, but where the module held, readings lie on a straight line over the set-points.
 */
function currentAt(set: Amperes, held: readonly CurvePoint[]): Amperes {
  const sets = held.map((point) => point.set);
  const distinct = new Set(sets).size;
  if (distinct < 3) {
    const nearest = held.at(-1);
    return nearest === undefined ? set : set + (nearest.current - nearest.set);
  }
  const fit = fitLine(
    sets,
    held.map((point) => point.current),
  );
  return fit.intercept + fit.slope * set;
}

/** `dropout-current`: the middle of the bracket; rectangular in it, with the promise of the load's current. */
export function dropoutFindings(evidence: Evidence, bracket: DropoutBracket | undefined): readonly Finding[] {
  if (bracket?.dropped === undefined) return [];
  const value = (bracket.held + bracket.dropped) / 2;
  const current = promisedErrors(evidence.header, 'load', 'current');
  const between =
    `held ${formatQuantity(bracket.held, 'current', { significant: 4 })}, ` +
    `dropped ${formatQuantity(bracket.dropped, 'current', { significant: 4 })}`;
  const note = bracket.moved ? `${between}; it had held more before: the limit came down meanwhile` : between;
  return [
    measured(
      'dropout-current',
      'current',
      value,
      [
        promised(
          'between the held and the dropped current',
          rectangular((bracket.dropped - bracket.held) / 2),
        ),
        promised(`${current.of}, gain`, current.gain * value),
        promised(`${current.of}, offset`, current.offset),
        promised(`${current.of}, resolution`, current.resolution),
      ],
      { step: bracket.step, note },
    ),
  ];
}
