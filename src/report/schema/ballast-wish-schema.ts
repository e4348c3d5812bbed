import * as z from '../../libraries/zod.js';
import type { AsWritten } from './as-written.js';
import { valueSchema } from './number-schemas.js';

/** What was asked of the ballasts of a group. */
export const ballastWishSchema = z.strictObject({
  ballast: valueSchema
    .nullable()
    .describe('The resistance asked for; null where it was to be chosen by the imbalance.'),
  imbalance: valueSchema
    .nullable()
    .describe('The most that shares may differ, by which it is chosen; null where a resistance was given.'),
  tolerance: valueSchema.describe('How far off each resistor may be, half-width.'),
});

export type BallastWishWritten = AsWritten<typeof ballastWishSchema>;
