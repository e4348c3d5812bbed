import { z } from 'zod';
import { count, line, readFromText } from './building-blocks.js';
import { addressForms, AddressError, parseAddress } from './connection-address.js';
import { found } from './plain-words.js';

const connection = readFromText(
  {
    description: 'The way to the instrument.',
    pattern: '^(?:tcp://.+:[0-9]+|serial:.+|replay:.+|simulated:.*)$',
    examples: [...addressForms],
  },
  `an address is needed: ${addressForms[0]}`,
  (value) => {
    if (typeof value === 'string') return parseAddress(value);
    throw new AddressError(`${found(value)}; an address is needed: ${addressForms[0]}`, String(value));
  },
);

/** One instrument of a bench: how it is spoken to, and where it is. */
export const instrumentPlace = z.strictObject({
  driver: line('The name of a shipped driver, or the path of a driver file from here.').min(1),
  connection,
  channel: count('Which channel of an instrument with several.', { least: 0, most: 9999 }).exactOptional(),
});
