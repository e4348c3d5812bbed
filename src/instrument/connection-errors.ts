import { exitCodes, RailproofError } from '../errors/railproof-error.js';

/** Nothing could be opened at the address: nobody there, refused, no such port, not allowed. */
export class InstrumentUnreachableError extends RailproofError {
  readonly code = 'INSTRUMENT_UNREACHABLE';
  readonly exitCode = exitCodes.instrument;
  readonly address: string;
  readonly reason: string;

  constructor(facts: { address: string; reason: string; advice?: string; cause?: unknown }) {
    super(`${facts.address}: ${facts.reason}`, {
      advice: facts.advice ?? 'Is it switched on, is the cable in, and is the address right?',
      cause: facts.cause,
    });
    this.address = facts.address;
    this.reason = facts.reason;
  }
}

/** Another program holds the serial port. */
export class PortBusyError extends RailproofError {
  readonly code = 'PORT_BUSY';
  readonly exitCode = exitCodes.instrument;
  readonly address: string;

  constructor(facts: { address: string; cause?: unknown }) {
    super(`${facts.address}: another program has this port open`, {
      advice:
        'Close the other program (a terminal window, another run, a watchman still at work) and try again.',
      cause: facts.cause,
    });
    this.address = facts.address;
  }
}

/** The line was there and is gone. */
export class ConnectionLostError extends RailproofError {
  readonly code = 'CONNECTION_LOST';
  readonly exitCode = exitCodes.instrument;
  readonly address: string;
  readonly reason: string;

  constructor(facts: { address: string; reason: string; cause?: unknown }) {
    super(`${facts.address}: connection lost: ${facts.reason}`, {
      advice:
        'Look at the instrument itself first: it may still be on. Then check its power and its cable; some instruments serve only one program at a time.',
      cause: facts.cause,
    });
    this.address = facts.address;
    this.reason = facts.reason;
  }
}
