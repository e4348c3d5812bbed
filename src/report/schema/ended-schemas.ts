import * as z from '../../libraries/zod.js';

/** How a run ended, and how far its record is to be believed; of a result, and of both sides of a comparison. */
export const endedKeys = {
  ended: z
    .enum(['completed', 'stopped', 'cut-off'])
    .describe(
      'How the run ended: as planned, before its end, or in a journal without an end (power cut, crash).',
    ),
  reason: z.string().nullable().describe('Why it ended so, in a sentence; null where nothing is to be said.'),
};

const count = (description: string) => z.int().nonnegative().describe(description);
const believed = {
  lines: count('How many lines of the journal are believed.'),
  bytes: count('How many bytes of it.'),
};

export const integritySchema = z
  .discriminatedUnion('kind', [
    z.strictObject({ kind: z.literal('whole').describe('Every seal holds, to the end.'), ...believed }),
    z.strictObject({
      kind: z.literal('cut-off').describe('Every seal holds, and there is no end.'),
      ...believed,
      tornBytes: count('How many bytes of a last line that is not whole.'),
    }),
    z.strictObject({
      kind: z.literal('damaged').describe('It is not as it was written.'),
      ...believed,
      line: count('The first line that is not believed, counted from 1.'),
      problem: z.string().describe('What is the matter with it.'),
    }),
  ])
  .describe('How much of the journal can be believed, by its seals.');

export const outcomeSchema = z.enum(['conforms', 'does-not-conform', 'undecided']);

export const outcomeOrNone = z.enum(['conforms', 'does-not-conform', 'undecided', 'not-judged']);

export const probability = z.number().min(0).max(1).nullable();
