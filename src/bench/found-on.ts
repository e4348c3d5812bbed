import { exitCodeOf, RailproofError, type ExitCode } from '../errors/railproof-error.js';
import type { Instrument } from '../instrument/instrument.js';

/** Something else failed before the run began, and the load was on when it was found. */
export class FoundOnError extends RailproofError {
  readonly code = 'FOUND_ON';
  /** That of what failed. */
  readonly exitCode: ExitCode;
  readonly address: string;

  constructor(address: string, cause: RailproofError) {
    super(`${cause.message}; and the input of the load at ${address} is on`, {
      advice:
        (cause.advice === undefined ? '' : `${cause.advice.replace(/[^.!?]$/, '$&.')} `) +
        'The load was on before this program came and is left so: `railproof safe` switches it off.',
      cause,
    });
    this.exitCode = exitCodeOf(cause);
    this.address = address;
  }
}

/**
 * What failed before a run began, to be thrown, with a word on the load where that says that it is on: we
 * did not switch it on, so it is left as it is, but nobody should reach for the leads not knowing.
 * Never rejects.
 */
export async function sayWhatIsOn(load: Instrument, failure: unknown): Promise<unknown> {
  if (!(failure instanceof RailproofError)) return failure;
  const on = await load.flag('input-state').catch(() => false);
  return on ? new FoundOnError(load.address, failure) : failure;
}
