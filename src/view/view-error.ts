import { messageOf } from '../errors/message-of.js';
import { exitCodes, RailproofError } from '../errors/railproof-error.js';

/** The live view can't be served: no port on loopback, or the page is not there. Nothing was begun. */
export class LiveViewError extends RailproofError {
  readonly code = 'LIVE_VIEW';
  readonly exitCode = exitCodes.inputOutput;

  constructor(cause: unknown) {
    super(`the live view can't be served: ${messageOf(cause)}`, {
      advice:
        'nothing was switched on; run it without --view, and the terminal shows and asks the same, or see that programs may listen on 127.0.0.1 here',
      cause,
    });
  }
}
