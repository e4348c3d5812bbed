import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes } from '../quantity/quantity.js';
import { fitLine } from '../statistics/line-fit.js';
import { rectangular } from '../statistics/uncertainty-budget.js';
import { heldPoints, stepsOf, type CurvePoint } from './curve.js';
import type { Evidence, StepEvidence } from './evidence.js';
import { type Finding, measured } from './finding.js';
import { promised, promisedErrors } from './promised-errors.js';

/** Between what the module held and where it dropped out, as currents that really flowed. */
export interface DropoutBracket {
  readonly step: number;
  readonly held: Amperes;
  readonly dropped: Amperes;
  /** As much or more was held earlier: the limit came down meanwhile. */
  readonly moved: boolean;
}

/**
 * The bracket of the search, or of a ramp that ended early where no search came to one; undefined when
 * everything asked for was held.
 */
export function dropoutBracket(evidence: Evidence): DropoutBracket | undefined {
  const inRecord = heldPoints(evidence.steps);
  return ['dropout-search', 'load-ramp']
    .flatMap((kind) => stepsOf(evidence, kind))
    .flatMap((step) => bracketOf(step, inRecord))
    .at(0);
}

/** Where the step itself held nothing below, what other steps of the record held is the lower end. */
function bracketOf(step: StepEvidence, inRecord: readonly CurvePoint[]): readonly DropoutBracket[] {
  const dropped = step.points.flatMap(({ outcome, phase, set }) =>
    outcome === 'dropped' && phase !== 'recovery' && set.current !== undefined ? [set.current] : [],
  );
  if (dropped.length === 0) return [];
  const lowestDropped = Math.min(...dropped);
  const inStep = heldPoints([step]);
  const held = inStep.some((point) => point.set < lowestDropped) ? inStep : inRecord;
  const below = held.filter((point) => point.set < lowestDropped);
  if (below.length === 0) return [];
  const flowing = readBackLine(held);
  return [
    {
      step: step.step,
      held: flowing(Math.max(...below.map((point) => point.set))),
      dropped: flowing(lowestDropped),
      moved: inStep.some((point) => point.set >= lowestDropped),
    },
  ];
}

/**
 * The current that is read back at a set-point. At a dropout the reading itself means nothing; but where
 * the module held, readings lie on a straight line over the set-points. Both ends of the bracket are taken
 * from it, so that the scatter of a single reading can't turn a narrow bracket round.
 */
function readBackLine(held: readonly CurvePoint[]): (set: Amperes) => Amperes {
  const sets = held.map((point) => point.set);
  if (new Set(sets).size >= 3) {
    const fit = fitLine(
      sets,
      held.map((point) => point.current),
    );
    if (fit.slope > 0) return (set) => fit.intercept + fit.slope * set;
  }
  const nearest = held.at(-1);
  return (set) => (nearest === undefined ? set : set + (nearest.current - nearest.set));
}

/** `dropout-current`: the middle of the bracket; rectangular in it, with the promise of the load's current. */
export function dropoutFindings(evidence: Evidence, bracket: DropoutBracket | undefined): readonly Finding[] {
  if (bracket === undefined) return [];
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
