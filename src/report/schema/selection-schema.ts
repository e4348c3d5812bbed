import * as z from '../../libraries/zod.js';
import { selectionFormat } from '../build/selection-json.js';
import type { AsWritten } from './as-written.js';
import { ballastWishSchema } from './ballast-wish-schema.js';
import { circuitSchema, commonSchema, moduleNames } from './build-part-schemas.js';
import { valueSchema } from './number-schemas.js';

const assignment = z
  .strictObject({
    recommended: valueSchema.describe('Of the weakest of the supplies, continuously.'),
    imbalance: valueSchema.describe('Of the worst group, at its recommended current.'),
    ballast: valueSchema.nullable().describe('In series with each module; null for none.'),
    supplies: z
      .array(
        z.strictObject({
          recommended: valueSchema.describe('What it may feed continuously.'),
          groups: z
            .array(
              z.strictObject({
                modules: moduleNames('The modules that stand side by side.'),
                recommended: valueSchema.describe('What they may feed continuously.'),
                imbalance: valueSchema.describe('How far their currents differ, over their mean.'),
              }),
            )
            .describe('One upon the other, the lowest first.'),
        }),
      )
      .describe('The supplies, each a stack of groups.'),
  })
  .meta({ id: 'assignment', description: 'Which modules are put together.' });

const count = (description: string) => z.int().positive().describe(description);

/** `select --json`. */
export const selectionSchema = z
  .strictObject({
    format: z.literal(selectionFormat).describe('The name of the format and its version.'),
    ...commonSchema.shape,
    wish: z
      .strictObject({
        group: count('Modules side by side in each place.'),
        stack: count('Places one upon the other.'),
        supplies: count('Alike supplies.'),
        ...ballastWishSchema.shape,
      })
      .describe('What was asked for.'),
    best: assignment.nullable().describe('The best way; null where the drawer does not hold enough.'),
    next: assignment
      .nullable()
      .describe('The best that puts them together otherwise; null where there is no other.'),
    margin: z
      .strictObject({
        current: valueSchema.describe('By how much more the best may feed.'),
        imbalance: valueSchema.describe('By how much less its currents differ.'),
        told: z.boolean().describe('Whether that is more than the records can tell.'),
        sentence: z.string().describe('The same in words.'),
      })
      .nullable()
      .describe('What the best is ahead by; null where there is no other.'),
    considered: z.int().nonnegative().describe('How many ways there are.'),
    unused: moduleNames('The modules that the best way leaves over.'),
    leftOut: z
      .array(
        z.strictObject({
          module: z.string().describe('Which one.'),
          why: z.string().describe('Why it could not be considered.'),
        }),
      )
      .describe('The modules that could not be considered.'),
    circuit: circuitSchema.nullable().describe('Of the first supply; null where there is none.'),
  })
  .meta({ title: 'railproof selection', description: 'Which modules of a drawer to put together.' });

export type SelectionJson = AsWritten<typeof selectionSchema>;
