import { exitCodes, RailproofError } from '../errors/railproof-error.js';

/**
 * What is measured is not where it should be, or not what it should be; it was noticed before anything was
 * made of the readings. `what` is the short name of it.
 */
export class WrongPlaceError extends RailproofError {
  readonly code = 'WRONG_PLACE';
  readonly exitCode = exitCodes.stopped;
  readonly what:
    | 'scanner-stuck'
    | 'probes-reversed'
    | 'probes-elsewhere'
    | 'modules-swapped'
    | 'meter-in-wrong-mode'
    | 'lead-open'
    | 'lead-shorted'
    | 'still-charged';

  constructor(what: WrongPlaceError['what'], message: string, advice: string) {
    super(message, { advice });
    this.what = what;
  }
}

/** The scanner was told to close one channel and says that another is closed. */
export class ScannerStuckError extends WrongPlaceError {
  readonly channel: number;
  readonly closed: number | null;

  constructor(address: string, channel: number, closed: number | null) {
    super(
      'scanner-stuck',
      `the scanner at ${address} was told to close channel ${channel} and says that ` +
        (closed === null ? 'none is closed' : `channel ${closed} is`),
      'a relay is stuck or the card sits in another slot: switch the scanner off and on, and try its channels by hand',
    );
    this.channel = channel;
    this.closed = closed;
  }
}
