import { execFileSync } from 'node:child_process';
import { closeSync, mkdirSync, openSync, writeSync } from 'node:fs';
import { join } from 'node:path';

/** In bytes: the record of a brisk run takes a small part of it. */
const size = 512 * 1024;

/** What a file system of memory hands out at once: a file has room up to the end of its last page. */
export const page = 4096;

export interface SmallDisk {
  readonly path: string;
  /** To the last byte that is free. */
  fill(): void;
  remove(): void;
}

/** A disk of its own, in memory; undefined with the reason on a machine where none may be mounted. */
export function smallDisk(path: string): SmallDisk | { readonly missing: string } {
  mkdirSync(path);
  try {
    execFileSync('mount', ['-t', 'tmpfs', '-o', `size=${size}`, 'railproof-small', path], { stdio: 'pipe' });
  } catch (error) {
    return { missing: error instanceof Error ? error.message : String(error) };
  }
  return {
    path,
    fill: () => {
      const file = openSync(join(path, 'filler'), 'a');
      try {
        for (let chunk = 16 * page; chunk >= 1; chunk = Math.floor(chunk / 2)) writeWhileItFits(file, chunk);
      } finally {
        closeSync(file);
      }
    },
    remove: () => {
      execFileSync('umount', [path], { stdio: 'pipe' });
    },
  };
}

function writeWhileItFits(file: number, chunk: number): void {
  const bytes = Buffer.alloc(chunk);
  try {
    while (writeSync(file, bytes) === chunk);
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code !== 'ENOSPC') throw error;
  }
}
