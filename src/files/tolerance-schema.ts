import * as z from '../libraries/zod.js';
import { line, name } from './building-blocks.js';
import { headers } from './file-kind.js';

/** A tolerance file but for its findings: what may be said of each depends on the findings there are. */
export const toleranceSchema = z
  .strictObject({
    railproof: z.literal(headers.tolerance).describe('The kind of file and the version of its format.'),
    name: name('What the tolerance is called.', ['earth-link-removed']),
    title: line('After what the module is compared, as a headline.').min(1),
    findings: z
      .array(z.unknown())
      .min(1)
      .max(200)
      .describe('What must have changed, and what must not; what is not listed may change.'),
  })
  .meta({
    title: 'railproof tolerance',
    description: 'What must have changed between two records of a module, and what must not.',
  });

/** An entry as written. What it may say depends on the finding, so its words are read afterwards. */
export const toleranceEntrySchema = z.strictObject({
  finding: z.string().meta({
    description: 'The name of a finding; with a star at its end, all that begin so.',
    examples: ['droop-resistance', 'share-of-*'],
  }),
  within: z
    .unknown()
    .meta({
      type: 'string',
      description: 'How far it may be from what it was: a share of that, or a quantity.',
      examples: ['20 %', '50 mV', '2 percentage points'],
    })
    .exactOptional(),
  same: z.literal(true).meta({ description: 'The word must be what it was.' }).exactOptional(),
  becomes: z
    .unknown()
    .meta({ type: 'string', description: 'The word that it must have become.', examples: ['isolated'] })
    .exactOptional(),
});
