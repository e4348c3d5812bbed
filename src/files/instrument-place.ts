import * as z from '../libraries/zod.js';
import { count, line, readFromText } from './building-blocks.js';
import type { ReplayAddress } from './bench.js';
import { addressForms, AddressError, parseAddress } from './connection-address.js';
import { found } from './plain-words.js';

const answersExample = 'replay:operator.jsonl';

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

/** What was recorded of the person at the bench. */
export const recordedAnswers = readFromText(
  {
    description: 'Recorded answers in place of the person at the bench, where every instrument is replayed.',
    pattern: '^replay:.+$',
    examples: [answersExample],
  },
  `a recording is needed: ${answersExample}`,
  (value): ReplayAddress => {
    const address = typeof value === 'string' ? parseAddress(value) : undefined;
    if (address?.kind === 'replay') return address;
    throw new AddressError(`${found(value)}; a recording is needed: ${answersExample}`, String(value));
  },
);

/** One instrument of a bench: how it is spoken to, and where it is. */
export const instrumentPlace = z.strictObject({
  driver: line('The name of a shipped driver, or the path of a driver file from here.').min(1),
  connection,
  channel: count('Which channel of an instrument with several.', { least: 0, most: 9999 }).exactOptional(),
});
