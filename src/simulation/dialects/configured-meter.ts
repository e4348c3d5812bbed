import type { Dialect } from './dialect.js';
import { configuration, question } from './scpi-commands.js';
import { ScpiInterpreter } from './scpi-interpreter.js';
import { nr3 } from './scpi-number.js';

/** A meter that is configured once, with CONFigure, and then read as often as wanted, with READ?. */
export const configuredMeter: Dialect = {
  name: 'configured-meter',
  role: 'meter',
  replyEnd: '\n',
  wake: (hands) =>
    new ScpiInterpreter({
      identity: hands.identity,
      reset: () => undefined,
      commands: [
        // Direct voltage is also what it wakes with, so there is nothing to remember.
        configuration('CONFigure[:SCALar]:VOLTage[:DC]', () => undefined),
        question('READ', () => nr3(hands.measure('voltage'))),
      ],
    }),
};
