import * as z from '../libraries/zod.js';
import { dialogueFormat } from './dialogue-record.js';

const t = z.number().describe('Seconds: those of the dialogue, or of the run that it is part of.');
const bytes = (description: string) =>
  z.string().meta({ description: `${description} One character a byte (Latin-1).`, examples: ['*IDN?\n'] });

const header = z.strictObject({
  format: z.literal(dialogueFormat).describe('The name of the format and its version.'),
  address: z.string().describe('Where the instrument was.'),
});

/** Each line of a recorded dialogue. */
export const dialogueLineSchema = z
  .union([
    header.describe('The first line.'),
    z.strictObject({ t, opened: z.string().describe('A connection was made, to this address.') }),
    z.strictObject({ t, unreachable: z.string().describe('None could be made; why.') }),
    z.strictObject({ t, busy: z.string().describe('Somebody else had it; why.') }),
    z.strictObject({ t, sent: bytes('What was sent.') }),
    z.strictObject({
      t,
      'out-in': z
        .number()
        .positive()
        .describe('How many more seconds what was sent just before was on its way out, over a slow port.'),
    }),
    z.strictObject({ t, received: bytes('What came.') }),
    z.strictObject({ t, lost: z.string().describe('The connection was lost; why.') }),
    z.strictObject({
      t,
      silent: z.int().positive().describe('How often nothing had come when it was looked for.'),
    }),
  ])
  .meta({
    title: 'railproof dialogue',
    description:
      'A line of a recorded dialogue: what went over the line to an instrument, every byte and when.',
  });
