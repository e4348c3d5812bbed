import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import type { Acknowledgement } from '../record/journal-event.js';
import type { Seconds } from '../quantity/quantity.js';
import { shown } from '../quantity/shown-text.js';
import type { Operator } from '../steps/operator.js';
import type { RecordedAnswer } from './answers-record.js';
import { StoppedByOperator } from './stopped.js';

/** The person is asked something now that was not asked when the answers were recorded. */
export class AnswersMismatchError extends RailproofError {
  readonly code = 'ANSWERS_MISMATCH';
  readonly exitCode = exitCodes.badFile;
  readonly file: string;
  readonly line: number;

  constructor(facts: { file: string; line: number; recorded: string; asked: string }) {
    super(`${facts.file}:${facts.line}: the recording has ${facts.recorded}, and now ${facts.asked}`, {
      advice: 'Answers replay only with the procedure and the bench they were recorded with.',
    });
    this.file = facts.file;
    this.line = facts.line;
  }
}

/**
 * The person of a recorded run: gives the same answers in the same order. `reach` sets the clock to when each
 * was given.
 */
export function replayedOperator(
  file: string,
  answers: readonly RecordedAnswer[],
  reach: (moment: Seconds) => void,
): Operator {
  let given = 0;
  const give = (answer: RecordedAnswer): void => {
    given += 1;
    reach(answer.t);
  };
  const mismatch = (asked: string): AnswersMismatchError =>
    // The first line names the format.
    new AnswersMismatchError({ file, line: given + 2, recorded: inWords(answers[given]), asked });
  const acknowledge = (caution: string): Acknowledgement | 'refused' => {
    const next = answers[given];
    if (next === undefined || !('acknowledged' in next) || next.acknowledged !== caution) {
      throw mismatch(`${shown(caution)} is to be acknowledged`);
    }
    give(next);
    return next.by;
  };
  const answer = (name: string): string => {
    const next = answers[given];
    if (next === undefined || !('asked' in next) || next.asked !== name) {
      throw mismatch(`${shown(name)} is asked`);
    }
    give(next);
    if ('stopped' in next) throw new StoppedByOperator(next.stopped);
    return next.answered;
  };
  return {
    present: true,
    acknowledge: (caution, _text, signal) => unlessAborted(signal, () => acknowledge(caution)),
    ask: ({ name }, signal) => unlessAborted(signal, () => answer(name)),
  };
}

async function unlessAborted<Result>(signal: AbortSignal, work: () => Result): Promise<Result> {
  signal.throwIfAborted();
  return Promise.resolve(work());
}

function inWords(answer: RecordedAnswer | undefined): string {
  if (answer === undefined) return 'come to its end';
  return 'asked' in answer
    ? `the answer to ${shown(answer.asked)}`
    : `${shown(answer.acknowledged)} acknowledged`;
}
