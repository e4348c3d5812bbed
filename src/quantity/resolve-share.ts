import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import type { QuantityOrShare, ReferenceName } from './quantity.js';

/** A share refers to something that no earlier step has measured and no label gives. */
export class NotYetMeasuredError extends RailproofError {
  readonly code = 'NOT_YET_MEASURED';
  readonly exitCode = exitCodes.badFile;
  readonly reference: ReferenceName;

  constructor(reference: ReferenceName) {
    const advice: Record<ReferenceName, string> = {
      'rated-voltage': 'Give the rated voltage in the module file.',
      'rated-current': 'Give the rated current in the module file.',
      'open-circuit-voltage': 'Put an open-circuit step before the one that needs it.',
      'dropout-current': 'Put a dropout-search step before the one that needs it.',
    };
    super(`${reference} has not been measured by then`, { advice: advice[reference] });
    this.reference = reference;
  }
}

/**
 * The value of a quantity, in the unit of its dimension, from what is known by now.
 * @throws NotYetMeasuredError
 * @example resolve({ kind: 'share', ratio: 1.4, of: 'rated-current' }, { 'rated-current': 4 }); // => 5.6
 */
export function resolve(quantity: QuantityOrShare, known: Partial<Record<ReferenceName, number>>): number {
  if (quantity.kind === 'absolute') return quantity.value;
  const whole = known[quantity.of];
  if (whole === undefined) throw new NotYetMeasuredError(quantity.of);
  return quantity.ratio * whole;
}
