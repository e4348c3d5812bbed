import * as z from '../libraries/zod.js';
import { quantity } from './building-blocks.js';
import type { Message } from './driver.js';
import { found } from './plain-words.js';

/** The text of one message. */
export const messageText = z.string().regex(/^[\x20-\x7e]{1,200}$/, {
  error: ({ input }) => `${found(input)}; a message is 1 to 200 plain ASCII characters on one line`,
});

const withCare = z
  .strictObject({
    send: messageText.describe('The message.'),
    rest: quantity('time', 'Nothing is sent for so long after it: the instrument does not hear.', {
      above: 0,
      most: 600,
    }).exactOptional(),
    until: z
      .literal('ready')
      .describe("'ready' is asked until the instrument says that it is.")
      .exactOptional(),
  })
  .transform(({ send, rest, until }): Message => ({
    text: send,
    ...(rest !== undefined && { rest }),
    ...(until !== undefined && { untilReady: true }),
  }));

const message = z.union([messageText.transform((text): Message => ({ text })), withCare], {
  error: ({ input }) => `${found(input)}; a message, or a map with 'send' and 'rest' or 'until', is needed`,
});

/** What is sent one after the other. */
export const messages = z.array(message).max(20);

/** What is sent for a reading. */
export const ask = z
  .union([messages.min(1), message], {
    error: ({ input }) => `${found(input)}; a message, or a list of messages, is needed`,
  })
  .transform((given): readonly Message[] => (Array.isArray(given) ? given : [given]))
  .describe('What is sent; of a list, the last message is the one that is answered.');
