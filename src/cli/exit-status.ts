import { exitCodes, type ExitCode } from '../errors/railproof-error.js';
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
