/** Exit statuses of the command line; the upper ones are those of sysexits. */
export const exitCodes = {
  conforms: 0,
  doesNotConform: 1,
  undecided: 2,
  stopped: 3,
  usage: 64,
  badFile: 65,
  missingFile: 66,
  instrument: 69,
  bug: 70,
  inputOutput: 74,
} as const;

export type ExitCode = (typeof exitCodes)[keyof typeof exitCodes];

/**
 * The family of everything that can go wrong and that we foresaw.
 *
 * `code` is stable once released: journals, scripts and documents refer to it. The message says what
 * happened and where, in one line; `advice` says what to do next. Facts that a program may want are
 * fields of the subclass, and the message is derived from them.
 */
export abstract class RailproofError extends Error {
  abstract readonly code: string;
  abstract readonly exitCode: ExitCode;
  readonly advice: string | undefined;

  constructor(message: string, options: { advice?: string; cause?: unknown } = {}) {
    super(message, options.cause === undefined ? undefined : { cause: options.cause });
    this.name = new.target.name;
    this.advice = options.advice;
  }
}

/** The exit status that an error stands for; what we did not foresee is our own fault. */
export function exitCodeOf(error: unknown): ExitCode {
  return error instanceof RailproofError ? error.exitCode : exitCodes.bug;
}
