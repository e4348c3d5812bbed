import { closeSync, constants, fstatSync, openSync, readFileSync } from 'node:fs';

/** A file of a record is not what a record holds: a pipe, a device, or larger than any. */
export class OddFileError extends Error {}

/**
 * Opens a file of a record for reading. What is no regular file is refused unread: a pipe may never be
 * written to, and a device never end.
 * @throws OddFileError, and whatever opening throws
 */
export function openRegular(path: string): number {
  // Not blocking: else the opening of a pipe waits for somebody to write to it.
  const file = openSync(path, constants.O_RDONLY | constants.O_NONBLOCK);
  const found = fstatSync(file);
  if (found.isFile()) return file;
  closeSync(file);
  throw new OddFileError(found.isDirectory() ? 'it is a folder' : 'it is a pipe or a device, not a file');
}

/** In bytes: what a run keeps beside its journal is small, however long it was. */
const largest = 64 * 1024 * 1024;

/**
 * The text of a file of a record.
 * @throws OddFileError, and whatever reading throws
 */
export function readWhole(path: string): string {
  const file = openRegular(path);
  try {
    if (fstatSync(file).size > largest) throw new OddFileError(`it is larger than ${largest / 2 ** 20} MiB`);
    return readFileSync(file, 'utf8');
  } finally {
    closeSync(file);
  }
}
