import * as z from '../../libraries/zod.js';
import type { AsWritten } from '../../report/schema/as-written.js';
import { role } from './drivers-schema.js';

const questions = (description: string) => z.array(z.string()).describe(description);

const family = z.strictObject({
  driver: z.string().describe('The name of a shipped driver.'),
  role: role.describe('The part of its instruments in the work.'),
  asked: questions('What was asked of all that it would ask.'),
  understood: questions('What of it was answered as it would read it.'),
  otherwise: questions('What was answered, and not as it would read it.'),
  isAnother: z.boolean().describe('Whether the name that the instrument gives itself is none it is for.'),
  score: z
    .number()
    .describe('Understood of one more than were asked: two of two prove less than seven of eight.'),
});

const sharedKeys = {
  format: z.literal('railproof/match 1').describe('The name of the format and its version.'),
  address: z.string().describe('Where the instrument is.'),
};

const silent = z.strictObject({
  ...sharedKeys,
  answered: z.literal(false).describe('Nothing answers the question who it is.'),
});

const answered = z.strictObject({
  ...sharedKeys,
  answered: z.literal(true).describe('It said who it is.'),
  identity: z.string().describe('What it calls itself.'),
  sendEnd: z.string().describe('What messages to it must end in.'),
  replyEnd: z
    .enum(['\r\n', '\n', '\r'])
    .optional()
    .describe('What its replies end in; left out where nothing ends them.'),
  echo: z.boolean().describe('Whether it repeats each message before it answers.'),
  prompt: z
    .string()
    .optional()
    .describe('What it sends when it will take the next message; left out where it sends nothing.'),
  families: z.array(family).describe('The drivers that fit, the best first.'),
  notAsked: questions('What was not asked, and why, a sentence each.'),
});

/** `drivers --match --json`. */
export const matchSchema = z.discriminatedUnion('answered', [silent, answered]).meta({
  title: 'railproof match',
  description: 'Which of the shipped drivers an instrument may be spoken to by.',
});

export type MatchJson = AsWritten<typeof matchSchema>;
