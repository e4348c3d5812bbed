import { exitCodes, RailproofError } from '../errors/railproof-error.js';

/** A run that can't go on from this record. */
export class NotResumableError extends RailproofError {
  readonly code = 'NOT_RESUMABLE';
  readonly exitCode = exitCodes.badFile;
  /** The record, as it was named. */
  readonly run: string;

  constructor(run: string, problem: string, advice: string) {
    super(`${run} can't be resumed: ${problem}`, { advice });
    this.run = run;
  }
}
