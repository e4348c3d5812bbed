import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { writeGroupRun } from './group-run.js';
import { writeModuleRun } from './module-run.js';

/** Writes a record of so many readings, or a few more, into an empty folder; how many they became comes back. */
export type WriteRecord = (folder: string, readings: number) => number;

export interface LongRecord {
  readonly whose: string;
  readonly write: WriteRecord;
}

export const longRecords: readonly LongRecord[] = [
  { whose: 'a module', write: writeModuleRun },
  { whose: 'a group of two', write: writeGroupRun },
];

/** What comes of a record that is there for as long as it is looked at. */
export async function inWrittenRecord<Result>(
  write: WriteRecord,
  readings: number,
  look: (run: string, readings: number) => Promise<Result>,
): Promise<Result> {
  const folder = mkdtempSync(join(tmpdir(), 'railproof-speed-'));
  try {
    return await look(folder, write(folder, readings));
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
