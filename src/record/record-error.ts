import { fileReason } from '../errors/file-reason.js';
import { exitCodes, RailproofError } from '../errors/railproof-error.js';

/** The record could not be written: no space, no permission, the disk gone. */
export class RecordWriteError extends RailproofError {
  readonly code = 'RECORD_WRITE';
  readonly exitCode = exitCodes.inputOutput;
  readonly path: string;

  constructor(path: string, cause: unknown) {
    super(`${path} can't be written: ${fileReason(cause)}`, {
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
    super(`${path} is no record: ${cause === undefined ? 'it has no run.json' : fileReason(cause)}`, {
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
