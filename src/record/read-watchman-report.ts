import * as z from '../libraries/zod.js';
import { readWhole } from './read-whole.js';
import type { RunFolder } from './run-folder.js';
import { watchmanFormat, type WatchmanReport } from './watchman-report.js';

/** Far more than any report has; what is longer is none. */
const longest = 1 << 16;

export const watchmanReportSchema = z
  .object({
    format: z.literal(watchmanFormat).describe('The name of the format and its version.'),
    noticed: z.iso.datetime().describe('When it noticed; ISO 8601, UTC.'),
    why: z
      .enum(['runner-vanished', 'runner-stopped-beating'])
      .describe('Whether the program was gone, or gave no sign of life and was ended.'),
    address: z.string().max(longest).describe('Of the load, as the bench file writes it.'),
    attempts: z
      .int()
      .nonnegative()
      .describe('How many times it tried to reach the load and to switch it off.'),
    outcome: z.enum(['off', 'unconfirmed']).describe('"off" where the load said so when it was read back.'),
    reason: z.string().max(longest).nullable().describe('Why it could not be confirmed; null where it was.'),
    took: z.number().nonnegative().describe('Seconds from noticing to the load read back, or given up.'),
  })
  .meta({
    title: 'railproof watchman',
    description: 'watchman.json: what the watchman did when the program was gone, or hung.',
  }) satisfies z.ZodType<WatchmanReport>;

/**
 * The watchman's report of a run; undefined where there is none, or none that can be understood: that a load
 * was switched off is believed of nothing else.
 */
export function readWatchmanReport(folder: RunFolder): WatchmanReport | undefined {
  try {
    return watchmanReportSchema.safeParse(JSON.parse(readWhole(folder.watchman))).data;
  } catch {
    return undefined;
  }
}
