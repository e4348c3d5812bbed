import { closeSync, fsyncSync, openSync } from 'node:fs';

/**
 * Flushes the names in a folder to the disk: a file survives a power cut only when its name does. Where
 * folders can't be flushed, none need be.
 */
export function flushFolder(path: string): void {
  let folder: number;
  try {
    folder = openSync(path, 'r');
  } catch {
    return;
  }
  try {
    fsyncSync(folder);
  } catch {
    // Some systems refuse it; they keep names by other means.
  } finally {
    closeSync(folder);
  }
}
