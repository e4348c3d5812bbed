import { fsyncSync, writeFileSync } from 'node:fs';
import { dirname } from 'node:path';
import { flushFolder } from './flush-folder.js';
import { replaceFileBy, type RunFolder } from './run-folder.js';

/** The name and version of the format; the number changes when a reader would have to. */
export const watchmanFormat = 'railproof/watchman 1';

/**
 * watchman.json: what the watchman did when the program that performed the run was gone, or hung. It is there
 * only where it had to do something, and beside the journal, which nobody could go on with.
 */
export interface WatchmanReport {
  readonly format: typeof watchmanFormat;
  /** ISO 8601, UTC: when it noticed. */
  readonly noticed: string;
  /** `runner-stopped-beating`: with the input on it gave no sign of life for some seconds, and was ended first. */
  readonly why: 'runner-vanished' | 'runner-stopped-beating';
  /** Of the load, as the bench file writes it. */
  readonly address: string;
  /** How many times it tried to reach the load and to switch it off. */
  readonly attempts: number;
  /** `off`: the load said so when it was read back. */
  readonly outcome: 'off' | 'unconfirmed';
  /** Why it could not be confirmed; null where it was. */
  readonly reason: string | null;
  /** Seconds from noticing to the load read back, or given up. */
  readonly took: number;
}

/** Writes the report and flushes it to the disk. @throws RecordWriteError */
export function writeWatchmanReport(folder: RunFolder, report: WatchmanReport): void {
  replaceFileBy(folder.watchman, (file) => {
    writeFileSync(file, `${JSON.stringify(report, null, 2)}\n`);
    fsyncSync(file);
  });
  flushFolder(dirname(folder.watchman));
}
