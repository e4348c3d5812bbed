import { exitCodes, RailproofError } from '../errors/railproof-error.js';

/** The person at the bench was asked for a quantity and never gave one. */
export class AnswerNotUnderstoodError extends RailproofError {
  readonly code = 'ANSWER_NOT_UNDERSTOOD';
  readonly exitCode = exitCodes.stopped;
  readonly question: string;
  readonly attempts: number;

  constructor(facts: { question: string; attempts: number; cause: Error }) {
    super(
      `the answer to "${facts.question}" was not understood ${facts.attempts} times; the last time: ${facts.cause.message}`,
      { advice: 'an answer is a number and its unit', cause: facts.cause },
    );
    this.question = facts.question;
    this.attempts = facts.attempts;
  }
}
