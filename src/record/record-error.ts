import { messageOf } from '../errors/message-of.js';
import { exitCodes, RailproofError } from '../errors/railproof-error.js';

/** The record could not be written: no space, no permission, the disk gone. */
export class RecordWriteError extends RailproofError {
  readonly code = 'RECORD_WRITE';
  readonly exitCode = exitCodes.inputOutput;
  readonly path: string;

  constructor(path: string, cause: unknown) {
    super(`${path} can't be written: ${reasonOf(cause)}`, {
      advice: 'choose another folder with --runs, or make room there',
      cause,
    });
    this.path = path;
  }
}

/** Somebody removed the record while it was being written; what is written on goes nowhere. */
export class RecordGoneError extends RailproofError {
  readonly code = 'RECORD_GONE';
  readonly exitCode = exitCodes.inputOutput;
  readonly path: string;

  constructor(path: string) {
    super(`${path} was removed while the run was writing to it: what was read is lost`, {
      advice: 'keep the folder of the records while a run goes on, and run again',
    });
    this.path = path;
  }
}

/** There is no record at this place. */
export class NoRecordError extends RailproofError {
  readonly code = 'NO_RECORD';
  readonly exitCode = exitCodes.missingFile;
  readonly path: string;

  constructor(path: string, cause?: unknown) {
    super(`${path} is no record: ${cause === undefined ? 'it has no run.json' : reasonOf(cause)}`, {
      advice: '`railproof runs` lists the records here',
      cause,
    });
    this.path = path;
  }
}

/** A record whose text does not say what a record must say. */
export class BadRecordError extends RailproofError {
  readonly code = 'BAD_RECORD';
  readonly exitCode = exitCodes.badFile;
  readonly path: string;

  constructor(path: string, problem: string) {
    super(`${path}: ${problem}`, {
      advice:
        'the record was changed or made by another version: keep it, see what `railproof analyse` still shows, and run again',
    });
    this.path = path;
  }
}

const reasons: Readonly<Record<string, string>> = {
  ENOSPC: 'the disk is full',
  EDQUOT: 'the disk quota is used up',
  EACCES: 'permission is missing',
  EPERM: 'permission is missing',
  EROFS: 'the file system is read-only',
  ENOENT: 'there is no such file or folder',
  ENOTDIR: 'a part of the path is not a folder',
  EEXIST: 'something of that name is there already',
  EFBIG: 'it is larger than a file may be here',
  EISDIR: 'it is a folder',
  EIO: 'the disk reports an error',
};

function reasonOf(cause: unknown): string {
  const code = (cause as { code?: unknown } | undefined)?.code;
  if (typeof code === 'string') return reasons[code] ?? code;
  return messageOf(cause);
}
