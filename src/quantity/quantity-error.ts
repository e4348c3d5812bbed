import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import { dimensionWords, needed } from './dimension-words.js';
import type { Dimension } from './quantity.js';
import { shown } from './shown-text.js';
import { allowedUnits } from './units.js';

/** A text that is not the quantity that is due at its place. */
export class QuantityError extends RailproofError {
  readonly code = 'QUANTITY';
  readonly exitCode = exitCodes.badFile;
  /** What stood there, as the message speaks of it. */
  readonly found: string;
  /** What would do. */
  readonly expected: string;

  constructor(message: string, facts: { found: string; expected: string }) {
    super(message);
    this.found = facts.found;
    this.expected = facts.expected;
  }
}

/** What was found is no quantity of this dimension at all. */
export function notThat(found: string, dimension: Dimension): QuantityError {
  return refusal(`found ${found}; ${needed(dimension)}`, found, dimension);
}

export function bareNumber(text: string, dimension: Dimension): QuantityError {
  const { name, examples } = dimensionWords[dimension];
  const found = `the bare number ${text}`;
  return refusal(`found ${found}; ${name} needs its unit: ${examples.join(', ')}`, found, dimension);
}

export function decimalComma(text: string, dimension: Dimension): QuantityError {
  const found = shown(text);
  const mended = shown(text.replace(',', '.'));
  return refusal(`found ${found}; the decimal sign is a point: ${mended}`, found, dimension);
}

export function unknownUnit(symbol: string, text: string, dimension: Dimension): QuantityError {
  const message =
    `found ${shown(text)}; no unit is written ${shown(symbol)}; ` +
    `${dimensionWords[dimension].name} is given in ${allowedUnits(dimension)}`;
  return refusal(message, shown(text), dimension);
}

export function otherDimension(text: string, found: Dimension, dimension: Dimension): QuantityError {
  return notThat(`${shown(text)}, which is ${dimensionWords[found].name}`, dimension);
}

export function tooLarge(text: string, dimension: Dimension): QuantityError {
  return refusal(`found ${shown(text)}, which is too large a number`, shown(text), dimension);
}

function refusal(message: string, found: string, dimension: Dimension): QuantityError {
  return new QuantityError(message, { found, expected: needed(dimension) });
}
