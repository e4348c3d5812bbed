import { formatQuantity } from '../quantity/format-quantity.js';
import type { Dimension } from '../quantity/quantity.js';
import { placeholderOf } from './driver-checks.js';
import type { ReadingMeaning } from './driver-dialogue.js';

const dimensionOf: Readonly<Record<string, Dimension>> = {
  '{amps}': 'current',
  '{volts}': 'voltage',
  '{watts}': 'power',
};

/** Of the value that an operation is given; undefined for the number of a channel, or where there is no value. */
export function dimensionOfValue(operation: string): Dimension | undefined {
  return dimensionOf[placeholderOf[operation] ?? ''];
}

/** As the `dialogue` of a driver file writes it: `15.21 V`, `yes`, `overload`. */
export function meaningText(meaning: ReadingMeaning): string {
  switch (meaning.kind) {
    case 'number':
      return formatQuantity(meaning.value, meaning.dimension);
    case 'flag':
      return meaning.value ? 'yes' : 'no';
    case 'channel':
      return String(meaning.value ?? 'none');
    case 'overload':
    case 'not-a-number':
    case 'not-understood':
      return meaning.kind;
  }
}
