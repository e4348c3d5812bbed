import { exitCodes, RailproofError } from '../errors/railproof-error.js';
import { listed } from '../quantity/listed.js';

/** The person at the bench wants the run to end. */
export class StoppedByOperator extends RailproofError {
  readonly code = 'STOPPED_BY_OPERATOR';
  readonly exitCode = exitCodes.stopped;
}

/** Nobody can answer at the terminal any more. */
export class TerminalClosed extends StoppedByOperator {
  constructor() {
    super('the terminal was closed at a question', {
      advice: 'run it in a terminal that stays open, or with --view, which serves a page to answer on',
    });
  }
}

/** Something broke that nobody foresaw, outside of any step; the run ends as safely as any other. */
export class UnforeseenError extends RailproofError {
  readonly code = 'UNFORESEEN';
  readonly exitCode = exitCodes.bug;

  constructor(cause: unknown) {
    super(
      `a fault of ours, please report it: ${cause instanceof Error ? (cause.stack ?? cause.message) : String(cause)}`,
      {
        cause,
        advice:
          'send along the record, where one was begun; with `railproof run --trace` it holds every byte too',
      },
    );
  }
}

/** The procedure asks for things only a person can do, and there is nobody. */
export class OperatorAbsentError extends RailproofError {
  readonly code = 'OPERATOR_ABSENT';
  readonly exitCode = exitCodes.usage;

  constructor(steps: readonly string[]) {
    super(`the procedure needs someone at the bench for ${listed(steps)}, and there is no terminal`, {
      advice:
        'run it in a terminal, or with --view, which serves a page to answer on; --yes acknowledges wiring and cautions only',
    });
  }
}
