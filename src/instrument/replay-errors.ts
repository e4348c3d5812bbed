import { exitCodes, RailproofError, type ExitCode } from '../errors/railproof-error.js';

/** What is said now is not what was said when the dialogue was recorded. */
export class ReplayMismatchError extends RailproofError {
  readonly code = 'REPLAY_MISMATCH';
  readonly exitCode = exitCodes.instrument;
  readonly file: string;
  readonly line: number;
  /** With control characters escaped. */
  readonly expected: string;
  readonly found: string;

  constructor(facts: { file: string; line: number; expected: string; found: string; advice: string }) {
    super(
      `${facts.file}:${facts.line}: the recording has ${facts.expected}, and now ${facts.found} was sent`,
      { advice: facts.advice },
    );
    this.file = facts.file;
    this.line = facts.line;
    this.expected = facts.expected;
    this.found = facts.found;
  }
}

/** A recorded dialogue that cannot be read: missing, too large, or not in the format. */
export class DialogueFileError extends RailproofError {
  readonly code = 'DIALOGUE_FILE';
  readonly exitCode: ExitCode;
  readonly file: string;
  readonly line: number | undefined;

  constructor(facts: { file: string; line?: number; reason: string; missing?: boolean; cause?: unknown }) {
    super(`${facts.file}${facts.line === undefined ? '' : `:${facts.line}`}: ${facts.reason}`, {
      advice:
        'A recorded dialogue begins with {"format":"railproof/dialogue 1","address":"…"}; each further line is {"t":0.1,"sent":"…"} or {"t":0.2,"received":"…"}.',
      cause: facts.cause,
    });
    this.exitCode = facts.missing === true ? exitCodes.missingFile : exitCodes.badFile;
    this.file = facts.file;
    this.line = facts.line;
  }
}
