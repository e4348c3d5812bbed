import { z } from 'zod';
import { readWhole } from './read-whole.js';
import type { RunFolder } from './run-folder.js';
import { watchmanFormat, type WatchmanReport } from './watchman-report.js';

/** Far more than any report has; what is longer is none. */
const longest = 1 << 16;

const schema: z.ZodType<WatchmanReport> = z.object({
  format: z.literal(watchmanFormat),
  noticed: z.iso.datetime(),
  why: z.enum(['runner-vanished', 'runner-stopped-beating']),
  address: z.string().max(longest),
  attempts: z.int().nonnegative(),
  outcome: z.enum(['off', 'unconfirmed']),
  reason: z.string().max(longest).nullable(),
  took: z.number().nonnegative(),
});

/**
 * The watchman's report of a run; undefined where there is none, or none that can be understood: that a load
 * was switched off is believed of nothing else.
 */
export function readWatchmanReport(folder: RunFolder): WatchmanReport | undefined {
  try {
    return schema.safeParse(JSON.parse(readWhole(folder.watchman))).data;
  } catch {
    return undefined;
  }
}
