import * as z from '../../libraries/zod.js';
import type { AsWritten } from '../../report/schema/as-written.js';

const entry = z.strictObject({
  run: z.string().describe("The name of the record's folder."),
  ended: z.string().meta({
    description: 'How the run ended; "unreadable" where its findings can not be read.',
    examples: ['completed', 'stopped', 'cut-off', 'unreadable'],
  }),
  outcome: z.string().meta({
    description: 'What was decided; empty where nothing can be read of it.',
    examples: ['conforms', 'does-not-conform', 'undecided', 'not-judged'],
  }),
  recommended: z.number().nullable().describe('The recommended current, in A; null where there is none.'),
  resumedFrom: z
    .string()
    .nullable()
    .describe('The record whose first steps it took over; null where it began afresh.'),
});

/** `runs --json`. */
export const runsSchema = z
  .strictObject({
    format: z.literal('railproof/runs 1').describe('The name of the format and its version.'),
    runs: z.array(entry).describe('The records, oldest first.'),
  })
  .meta({ title: 'railproof runs', description: 'The records of a folder.' });

export type RunsJson = AsWritten<typeof runsSchema>;
