import { exitCodes, RailproofError } from '../errors/railproof-error.js';

/** There are numbers, and they are sound, but too few of them (or too few different ones) to fit through. */
export class TooFewPointsError extends RailproofError {
  readonly code = 'TOO_FEW_POINTS';
  readonly exitCode = exitCodes.badFile;
  readonly points: number;
  readonly needed: number;

  constructor(facts: { readonly points: number; readonly needed: number; readonly allAtOnePlace: boolean }) {
    super(
      facts.allAtOnePlace
        ? `a line cannot be fitted: all ${facts.points} points are at the same place`
        : `a line with an uncertainty needs at least ${facts.needed} points, and there are ${facts.points}`,
      { advice: 'Measure at more set-points, spread over the range.' },
    );
    this.points = facts.points;
    this.needed = facts.needed;
  }
}
