import * as z from '../libraries/zod.js';
import { choice, count, quantity } from './building-blocks.js';
import { camelKeys } from './camel-keys.js';
import { fastestLine, slowestLine } from './connection-address.js';
import { found } from './plain-words.js';

const lineEnd = (description: string): z.ZodString =>
  z
    .string()
    .refine((text) => /^\p{ASCII}{1,4}$/u.test(text), {
      error: ({ input }) => `${found(input)}; 1 to 4 ASCII characters are needed, as in "\\n" or "\\r\\n"`,
    })
    .meta({ description, examples: ['\n', '\r\n'] });

const prompt = z
  .string()
  .refine((text) => /^[\x20-\x7e\r\n]{0,19}[\x21-\x7e][ ]{0,4}$/.test(text), {
    error: ({ input }) => `${found(input)}; 1 to 20 ASCII characters that are seen are needed, as in "> "`,
  })
  .meta({
    description: 'What the instrument sends, without an end of line, when it will take the next message.',
    examples: ['> '],
  });

const dataBits = z.union([z.literal(7), z.literal(8)]).describe('Data bits.');
const stopBits = z.union([z.literal(1), z.literal(2)]).describe('Stop bits.');

const serial = z
  .strictObject({
    baud: count('The speed.', { least: slowestLine, most: fastestLine }).exactOptional(),
    data: dataBits.exactOptional(),
    parity: choice(['none', 'even', 'odd'], 'The parity bit.').exactOptional(),
    stop: stopBits.exactOptional(),
    flow: choice(['none', 'hardware', 'software'], 'The handshake.').exactOptional(),
    dtr: choice(['on', 'off'], 'The control line DTR while the port is open.').exactOptional(),
    rts: choice(
      ['on', 'off'],
      'The control line RTS while the port is open; a hardware handshake moves it itself.',
    ).exactOptional(),
  })
  .describe("What a serial line is set to, where the bench's address does not say otherwise.");

/** How messages travel. */
export const wireSchema = camelKeys(
  z.strictObject({
    'send-end': lineEnd('What ends a message to the instrument.').default('\n'),
    'reply-end': lineEnd('What ends a reply.').default('\n'),
    gap: quantity('time', 'Silence kept between two messages.', { least: 0, most: 60 }).prefault('0 ms'),
    timeout: quantity('time', 'How long a reply may take.', { above: 0, most: 600 }).prefault('1 s'),
    echo: z
      .boolean()
      .describe('Whether the instrument repeats each message before it answers.')
      .default(false),
    prompt: prompt.exactOptional(),
    serial: serial.exactOptional(),
  }),
)
  .prefault({})
  .describe('How messages travel.');
