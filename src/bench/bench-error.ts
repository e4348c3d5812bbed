import { exitCodes, RailproofError } from '../errors/railproof-error.js';

/** A reading went beyond a limit: the run stops and the bench is made safe. */
export class GuardTrippedError extends RailproofError {
  readonly code = 'GUARD_TRIPPED';
  readonly exitCode = exitCodes.stopped;
  readonly guard: string;

  constructor(guard: string, text: string, advice: string) {
    super(text, { advice });
    this.guard = guard;
  }
}

/** Something was not as it must be before anything is energised. */
export class PreFlightError extends RailproofError {
  readonly code = 'PRE_FLIGHT';
  readonly exitCode = exitCodes.stopped;
  /** What was found, in words. */
  readonly what: string;

  constructor(what: string, advice: string) {
    super(`before anything was switched on: ${what}`, { advice });
    this.what = what;
  }
}

/** A step asked for more than the bench allows; the bench has refused. */
export class BeyondCeilingError extends RailproofError {
  readonly code = 'BEYOND_CEILING';
  readonly exitCode = exitCodes.stopped;
  readonly setBy: string;

  constructor(asked: string, ceiling: string, setBy: string) {
    super(`${asked} was asked for and ${setBy} allows ${ceiling}`, {
      advice: 'lower what the procedure asks, or use a bench that allows it',
    });
    this.setBy = setBy;
  }
}

/** The load does not do what it was told. */
export class DisobeyedError extends RailproofError {
  readonly code = 'DISOBEYED';
  readonly exitCode = exitCodes.instrument;
  readonly address: string;

  constructor(address: string, what: string) {
    super(`the load at ${address} ${what}`, {
      advice: 'switch it off by hand; then `railproof drivers --try` shows which messages it understands',
    });
    this.address = address;
  }
}
