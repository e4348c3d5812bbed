import { exitCodes, RailproofError } from '../errors/railproof-error.js';

/**
 * Numbers that no calculation can be made from: none at all, NaN, infinite, or outside what the
 * calculation is defined for. Readings are sifted before they come here, so this is a fault of ours.
 */
export class UnfitDataError extends RailproofError {
  readonly code = 'UNFIT_DATA';
  readonly exitCode = exitCodes.bug;
  /** The calculation that refused, as its function is called. */
  readonly calculation: string;
  /** What is wrong with the numbers. */
  readonly problem: string;

  constructor(calculation: string, problem: string) {
    super(`${calculation} cannot be worked out: ${problem}`, {
      advice:
        'This is a fault in railproof, not in the measurement; please report it together with the record.',
    });
    this.calculation = calculation;
    this.problem = problem;
  }
}

/** Refuses an empty list, and names the first value that is no finite number. Cost: one pass. */
export function requireFinite(calculation: string, values: ArrayLike<number>): void {
  if (values.length === 0) throw new UnfitDataError(calculation, 'there are no values');
  for (let index = 0; index < values.length; index += 1) {
    if (Number.isFinite(values[index])) continue;
    const place = `value ${index + 1} of ${values.length}`;
    throw new UnfitDataError(calculation, `${place} is ${String(values[index])}`);
  }
}

/** Refuses x and y that do not belong together. */
export function requireSameLength(calculation: string, x: ArrayLike<number>, y: ArrayLike<number>): void {
  if (x.length === y.length) return;
  throw new UnfitDataError(calculation, `there are ${x.length} values of x and ${y.length} of y`);
}
