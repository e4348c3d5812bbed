import * as z from '../../libraries/zod.js';
import type { AsWritten } from '../../report/schema/as-written.js';

export const role = z.enum(['load', 'meter', 'scanner', 'thermometer', 'source']);

/** `drivers --json`. */
export const driversSchema = z
  .strictObject({
    format: z.literal('railproof/drivers 1').describe('The name of the format and its version.'),
    drivers: z
      .array(
        z.strictObject({
          name: z.string().describe('What the driver is called.'),
          role: role.describe('The part of its instruments in the work.'),
          summary: z.string().describe('Which instruments it is for.'),
        }),
      )
      .describe('The drivers that come with the program.'),
  })
  .meta({ title: 'railproof drivers', description: 'The drivers that come with the program.' });

export type DriversJson = AsWritten<typeof driversSchema>;
