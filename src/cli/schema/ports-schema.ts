import * as z from '../../libraries/zod.js';
import type { AsWritten } from '../../report/schema/as-written.js';

/** `ports --json`. */
export const portsSchema = z
  .strictObject({
    format: z.literal('railproof/ports 1').describe('The name of the format and its version.'),
    ports: z
      .array(
        z.strictObject({
          path: z.string().meta({
            description: 'Where it is; behind `serial:` it is an address.',
            examples: ['/dev/ttyUSB0'],
          }),
          description: z
            .string()
            .describe('What the system knows of what is plugged in there; empty where it knows nothing.'),
        }),
      )
      .describe('The serial ports of this machine.'),
  })
  .meta({ title: 'railproof ports', description: 'The serial ports of a machine.' });

export type PortsJson = AsWritten<typeof portsSchema>;
