import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Volts } from '../quantity/quantity.js';

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

/** After an overload the module's voltage never came back; going on would only work something broken. */
export class ModuleStaysOffError extends RailproofError {
  readonly code = 'MODULE_STAYS_OFF';
  readonly exitCode = exitCodes.stopped;

  constructor(cycled: boolean) {
    super(
      cycled
        ? 'the module stays off after an overload, even after its input was cycled'
        : 'the module stays off after an overload, and nobody is here to cycle its input',
      {
        advice:
          'unplug it, wait until its capacitors are empty, a minute or so, and plug it in: one that latches off comes ' +
          'back then. Do not use it before it is known why',
      },
    );
  }
}

/** A trace goes downwards, and was asked to go up. */
export class TraceRisesError extends RailproofError {
  readonly code = 'TRACE_RISES';
  readonly exitCode = exitCodes.stopped;
  readonly from: Volts;
  readonly to: Volts;

  constructor(from: Volts, to: Volts) {
    const [first, last] = [from, to].map((volts) => formatQuantity(volts, 'voltage', { significant: 4 }));
    super(`a limit-trace goes downwards, and was asked to go from ${String(first)} to ${String(last)}`, {
      advice: "lower its 'to', or raise its 'from'",
    });
    this.from = from;
    this.to = to;
  }
}

/** One take after the other of the same point was interrupted: over such a line nothing can be measured. */
export class UnsteadyLineError extends RailproofError {
  readonly code = 'UNSTEADY_LINE';
  readonly exitCode = exitCodes.instrument;
  readonly takes: number;
  /** The last interruption, in words. */
  readonly last: string;

  constructor(facts: { takes: number; last: string }) {
    super(`one point was interrupted ${facts.takes} times in a row; the last time: ${facts.last}`, {
      advice:
        'the line is not good enough to measure over: try another cable, a place away from what disturbs it, a lower baud rate, or a longer timeout in the driver',
    });
    this.takes = facts.takes;
    this.last = facts.last;
  }
}
