import { exitCodes, type ExitCode } from '../errors/railproof-error.js';
import type { Outcome } from '../judgement/judge.js';
import type { BuildOutcome } from '../report/build/any-build.js';
import type { Result } from '../report/result.js';

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

/** The exit status that a record stands for: that of its run, and where it ran to its end that of what it shows. */
export function statusOfRecord({ evidence, outcome }: Result): ExitCode {
  const status = evidence.ended?.status ?? exitCodes.conforms;
  return isExitCode(status) && status !== exitCodes.conforms ? status : statusOfOutcome(outcome);
}

function isExitCode(status: number): status is ExitCode {
  return (Object.values(exitCodes) as number[]).includes(status);
}

/** The exit status that a build stands for. */
export function statusOfBuild(outcome: BuildOutcome): ExitCode {
  switch (outcome) {
    case 'may-be-built':
      return exitCodes.conforms;
    case 'must-not-be-built':
    case 'too-little':
      return exitCodes.doesNotConform;
    case 'cannot-tell':
      return exitCodes.undecided;
  }
}
