import { exitCodes, type ExitCode, RailproofError } from '../errors/railproof-error.js';
import type { Outcome } from '../judgement/judge.js';

/** The exit status that a decision stands for. */
export function statusOfOutcome(outcome: Outcome | 'not-judged'): ExitCode {
  switch (outcome) {
    case 'conforms':
    case 'not-judged':
      return exitCodes.conforms;
    case 'does-not-conform':
      return exitCodes.doesNotConform;
    case 'undecided':
      return exitCodes.undecided;
  }
}

/** The exit status that an error stands for; what we did not foresee is our own fault. */
export function statusOfError(error: unknown): ExitCode {
  return error instanceof RailproofError ? error.exitCode : exitCodes.bug;
}
