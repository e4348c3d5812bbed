import * as z from '../libraries/zod.js';
import { answersFormat, type RecordedAnswer } from './answers-record.js';

const t = z.number().describe('Seconds since the run began.');
const asked = z.string().describe('The name of what was asked.');

const header = z.strictObject({
  format: z.literal(answersFormat).describe('The name of the format and its version.'),
});

const given = z.union([
  z.strictObject({
    t,
    acknowledged: z.string().describe('The caution that was shown.'),
    by: z
      .enum(['operator', '--yes', 'simulated-operator', 'refused'])
      .describe('Who took note of it, or that nobody did.'),
  }),
  z.strictObject({ t, asked, answered: z.string().describe('What was answered.') }),
  z.strictObject({ t, asked, stopped: z.string().describe('The run was stopped at it; why.') }),
]) satisfies z.ZodType<RecordedAnswer>;

/** Each line of the answers that a trace keeps. */
export const answersLineSchema = z.union([header.describe('The first line.'), ...given.options]).meta({
  title: 'railproof answers',
  description: 'A line of recorded answers: what the person at the bench did when asked.',
});
